import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import net from 'node:net';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { cleanEnv } from '../lib/children.mjs';
import { clusterFolder } from '../lib/cluster.mjs';
import { freePort, isFree } from '../lib/ports.mjs';
import { identity, pause } from '../lib/processes.mjs';
import { startPostgres } from '../postgres.mjs';
import { copyCheckout } from './support/checkout.mjs';

// The launcher as people run it, in a checkout of its own.
const folder = mkdtempSync(path.join(tmpdir(), 'tallypole-start-'));
const base = clusterFolder(path.join(folder, '.data/postgres'));
/** @type {Record<string, number>} */
const ports = {};
/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();

/** @param {string[]} args of node */
function run(...args) {
  const env = { ...cleanEnv, ...Object.fromEntries(Object.entries(ports).map(([name, port]) => [name, String(port)])) };
  const child = spawn(process.execPath, args, { cwd: folder, env, stdio: ['ignore', 'pipe', 'pipe'] });
  running.add(child);
  const said = { text: '' };
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk) => (said.text += chunk));
  const ended = once(child, 'close').then(([code, signal]) => {
    running.delete(child);
    return { code: code ?? signal, text: said.text };
  });
  return { child, said, ended };
}

async function start() {
  const launcher = run('mocks/start.mjs');
  const ready = (async () => {
    while (!launcher.said.text.includes('Ctrl-C stops everything')) await pause(50);
  })();
  const early = launcher.ended.then(({ text }) => Promise.reject(new Error(`the launcher ended early: ${text}`)));
  await Promise.race([ready, early]);
  early.catch(() => {});
  return launcher;
}

async function nothingLeft() {
  for (const until = Date.now() + 15_000; Date.now() < until; await pause(100)) {
    const free = await Promise.all(Object.values(ports).map(isFree));
    if (free.every(Boolean) && !serverLives()) return true;
  }
  return false;
}

function serverLives() {
  try {
    return identity(Number(readFileSync(path.join(base, 'data/postmaster.pid'), 'utf8').split('\n')[0])) !== undefined;
  } catch {
    return false;
  }
}

/**
 * The process that runs a program for the launcher.
 * @param {import('node:child_process').ChildProcess} launcher
 * @param {string} file
 */
function childOf(launcher, file) {
  const children = readFileSync(`/proc/${launcher.pid}/task/${launcher.pid}/children`, 'utf8').trim().split(' ');
  const found = children.find((pid) => readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').includes(file));
  if (!found) throw new Error(`no child runs ${file}`);
  return Number(found);
}

const mails = async () => /** @type {any[]} */ (await (await fetch(`http://127.0.0.1:${ports['MAIL_PAGE_PORT']}/api/email`)).json()).map(({ subject }) => subject).sort();
const people = async () => /** @type {any} */ (await (await fetch(`http://127.0.0.1:${ports['PORT']}/api/demo/people`)).json());

beforeAll(async () => {
  await copyCheckout(folder);
  for (const name of ['PORT', 'STRIPE_PORT', 'MAIL_PAGE_PORT', 'SMTP_PORT', 'STORAGE_PORT']) ports[name] = await freePort();
}, 180_000);

afterAll(async () => {
  const left = [...running];
  for (const child of left) child.kill('SIGTERM');
  await Promise.all(left.map((child) => (child.exitCode === null ? once(child, 'close') : undefined)));
  for (const gone of [base, folder]) rmSync(gone, { recursive: true, force: true });
}, 60_000);

describe('before anything is started', () => {
  afterEach(() => rmSync(path.join(folder, '.env'), { force: true }));

  test('a broken .env gives one line and stops', async () => {
    writeFileSync(path.join(folder, '.env'), '# mine\nPORT 4300\n');
    const { code, text } = await run('mocks/start.mjs').ended;
    expect({ code, text: text.trim() }).toEqual({ code: 1, text: '.env, line 2 is not of the form NAME=value.' });
  });

  test('a taken port gives one line and stops', async () => {
    const server = net.createServer().listen(ports['SMTP_PORT'], '127.0.0.1');
    await once(server, 'listening');
    const { code, text } = await run('mocks/start.mjs').ended;
    server.close();
    expect(code).toBe(1);
    expect(text.trim()).toBe(`Port ${ports['SMTP_PORT']}, wanted by the mail server, is already in use. Free it, or set SMTP_PORT to another port in .env.`);
  });

  test('a missing server gives one line and stops', async () => {
    writeFileSync(path.join(folder, '.env'), 'PG_BIN=/nowhere\n');
    const { code, text } = await run('mocks/start.mjs').ended;
    expect({ code, text: text.trim() }).toEqual({ code: 1, text: 'PG_BIN is /nowhere, but there is no initdb in it.' });
  });
});

describe('a whole start', () => {
  test('comes up, refuses a second one and a reset, is backed up and brought back, keeps its data over a restart, leaves nothing behind', async () => {
    writeFileSync(path.join(folder, '.env'), 'STORAGE=s3\n');
    const first = await start();
    expect((await fetch(`http://127.0.0.1:${ports['PORT']}/api/health`)).status).toBe(200);
    expect((await fetch(`http://127.0.0.1:${ports['PORT']}/`)).headers.get('content-type')).toMatch(/text\/html/);
    for (const { email } of (await people()).people) expect(first.said.text).toContain(email);

    const second = await run('mocks/start.mjs').ended;
    expect(second).toEqual({ code: 1, text: expect.stringContaining(`already runs from this folder as process ${first.child.pid}`) });
    expect(await run('mocks/reset.mjs', '--yes').ended).toEqual({ code: 1, text: expect.stringContaining('already runs') });

    const { objects } = /** @type {any} */ (await (await fetch(`http://127.0.0.1:${ports['STORAGE_PORT']}/_control`)).json());
    expect(objects.length).toBeGreaterThan(10);
    // the folder is meant from where the command is given
    const backedUp = new RegExp(`^Backed up to .*/kept/monday: the database as of .* and ${objects.length} files\\.$`, 'm');
    expect(await run('mocks/keep.mjs', 'backup', '--to', 'kept/monday').ended).toEqual({ code: 0, text: expect.stringMatching(backedUp) });
    expect(await run('mocks/keep.mjs', 'restore', '--from', 'kept/monday', '--over').ended).toEqual({ code: 1, text: expect.stringContaining('Stop them first.') });

    let before = await mails();
    for (let i = 0; before.length === 0 && i < 100; i += 1) {
      await pause(100);
      before = await mails();
    }
    first.child.kill('SIGTERM');
    expect((await first.ended).code).toBe(0);
    expect(await nothingLeft()).toBe(true);
    const restored = await run('mocks/keep.mjs', 'restore', '--from', 'kept/monday', '--over').ended;
    expect(restored).toEqual({ code: 0, text: expect.stringContaining(`with ${objects.length} files.`) });
    expect(restored.text).not.toContain('BROKEN');
    expect(await nothingLeft()).toBe(true);

    const again = await start();
    expect(await mails()).toEqual(expect.arrayContaining(before));
    again.child.kill('SIGINT');
    expect((await again.ended).code).toBe(0);
    rmSync(path.join(folder, '.env'));
  }, 240_000);

  test('kill -9 of the launcher takes everything along', async () => {
    const launcher = await start();
    launcher.child.kill('SIGKILL');
    expect(await nothingLeft()).toBe(true);
  }, 90_000);

  test('a part that crashes stops the rest, with a line that names it', async () => {
    const launcher = await start();
    process.kill(childOf(launcher.child, 'api/dist/worker.js'), 'SIGKILL');
    const { code, text } = await launcher.ended;
    expect(code).toBe(1);
    expect(text).toContain('The worker ended unexpectedly (SIGKILL); everything else is being stopped.');
    expect(await nothingLeft()).toBe(true);
  }, 90_000);

  test('an edited migration gives one line that offers the reset; the reset makes a new start possible', async () => {
    const pg = await startPostgres({ dir: path.join(folder, '.data/postgres') });
    const name = pg.psql('tally', `update migration set sha256 = 'other' where name = (select min(name) from migration) returning name`);
    await pg.stop();
    const { code, text } = await run('mocks/start.mjs').ended;
    expect(code).toBe(1);
    expect(text.trim().split('\n').at(-1)).toBe(`Migration ${name} was edited after it had been applied. Undo the edit, or run "npm run reset" to start with an empty database.`);
    expect(await nothingLeft()).toBe(true);

    expect(await run('mocks/reset.mjs').ended).toMatchObject({ code: 1, text: expect.stringContaining('npm run reset -- --yes') });
    expect(await run('mocks/reset.mjs', '--yes').ended).toMatchObject({ code: 0 });
    const fresh = await start();
    fresh.child.kill('SIGHUP');
    expect((await fresh.ended).code).toBe(0);
  }, 120_000);
});
