import { fork } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import net from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { removeOrphans } from '../lib/build.mjs';
import { startNode, stopAll } from '../lib/children.mjs';
import { findPostgres } from '../lib/debian.mjs';
import { tryLock, withLock } from '../lib/lock.mjs';
import { outdatedPackage } from '../lib/packages.mjs';
import { requireFreePorts } from '../lib/ports.mjs';
import { identity, lives, pause } from '../lib/processes.mjs';
import { readReport } from '../lib/reports.mjs';
import { secretsIn } from '../lib/secrets.mjs';

const folder = mkdtempSync(path.join(tmpdir(), 'tallypole-parts-'));
const file = (/** @type {string} */ name) => path.join(folder, name);
afterAll(() => rmSync(folder, { recursive: true }));

describe('ports', () => {
  test('a taken port is refused with its number, who wants it and the variable that moves it', async () => {
    const server = net.createServer().listen(0, '127.0.0.1');
    await once(server, 'listening');
    const { port } = /** @type {net.AddressInfo} */ (server.address());
    const wanted = [{ port, variable: 'SMTP_PORT', what: 'the mail server' }];
    await expect(requireFreePorts(wanted)).rejects.toThrow(`Port ${port}, wanted by the mail server, is already in use. Free it, or set SMTP_PORT to another port in .env.`);
    setTimeout(() => server.close(), 300);
    await requireFreePorts(wanted, 5000); // what is leaving is waited for
  });

  test('one port for two things is refused', async () => {
    const wanted = [{ port: 1, variable: 'PORT', what: 'a' }, { port: 1, variable: 'SMTP_PORT', what: 'b' }];
    await expect(requireFreePorts(wanted)).rejects.toThrow('PORT and SMTP_PORT are both 1; give each its own port in .env.');
  });
});

describe('locks', () => {
  test('one holder at a time; a dead one is replaced', () => {
    const first = tryLock(file('a.lock'));
    expect(first).toMatchObject({ stale: false });
    expect(tryLock(file('a.lock'))).toEqual({ holder: identity(process.pid) });
    if ('release' in first) first.release();
    writeFileSync(file('a.lock'), `${process.pid}-1`); // this number, but a process that began at another time
    expect(tryLock(file('a.lock'))).toMatchObject({ stale: true });
  });

  test('waiting for a lock', async () => {
    /** @type {string[]} */
    const seen = [];
    const work = (/** @type {string} */ name) => withLock(file('b.lock'), async () => {
      seen.push(`${name} in`);
      await pause(50);
      seen.push(`${name} out`);
    });
    await Promise.all([work('a'), work('b')]);
    expect(seen).toEqual(['a in', 'a out', 'b in', 'b out']);
    expect(existsSync(file('b.lock'))).toBe(false);
  });
});

describe('children', () => {
  const sleeper = path.join(import.meta.dirname, 'support/sleeper.mjs');

  test('a program ends when asked, and is killed when it does not', async () => {
    const polite = startNode([sleeper], { output: 'ignore' });
    const deaf = startNode([sleeper, 'deaf'], { output: 'ignore' });
    await Promise.all([once(polite, 'message'), once(deaf, 'message')]);
    await stopAll([polite, deaf], 300);
    expect([polite.signalCode, deaf.signalCode]).toEqual(['SIGTERM', 'SIGKILL']);
  });

  test('a program leaves when its starter is killed with -9', async () => {
    const starter = fork(path.join(import.meta.dirname, 'support/start-sleeper.mjs'));
    const [pid] = await once(starter, 'message');
    const id = identity(pid) ?? '';
    expect(lives(id)).toBe(true);
    starter.kill('SIGKILL');
    for (let i = 0; lives(id) && i < 100; i += 1) await pause(50);
    expect(lives(id)).toBe(false);
  });
});

test('built files without a source are removed, others stay', () => {
  for (const name of ['src/migrations', 'dist/migrations', 'dist/gone']) mkdirSync(file(name), { recursive: true });
  for (const name of ['src/migrations/1-a.ts', 'dist/migrations/1-a.js', 'dist/migrations/1-a.js.map', 'dist/migrations/2-b.js', 'dist/migrations/2-b.d.ts', 'dist/gone/c.js', 'dist/.tsbuildinfo']) writeFileSync(file(name), '');
  removeOrphans(file('src'), file('dist'));
  const left = ['dist/migrations/1-a.js', 'dist/migrations/1-a.js.map', 'dist/.tsbuildinfo'];
  expect(left.filter((name) => existsSync(file(name)))).toEqual(left);
  expect(['dist/migrations/2-b.js', 'dist/migrations/2-b.d.ts', 'dist/gone/c.js'].filter((name) => existsSync(file(name)))).toEqual([]);
});

test('secrets are made once, for the owner alone to read; a missing one is added', () => {
  const first = secretsIn(file('secrets.json'));
  expect(secretsIn(file('secrets.json'))).toEqual(first);
  expect(first.JWT_SECRET.length).toBeGreaterThanOrEqual(32);
  writeFileSync(file('secrets.json'), JSON.stringify({ JWT_SECRET: 'kept' }));
  expect(secretsIn(file('secrets.json'))).toMatchObject({ JWT_SECRET: 'kept', STRIPE_WEBHOOK_SECRET: expect.stringMatching(/^whsec_/) });
  writeFileSync(file('secrets.json'), '{');
  expect(() => secretsIn(file('secrets.json'))).toThrow(/not readable JSON/);
});

test('packages: missing, outdated, an optional one for another machine, complete', () => {
  const lock = { packages: { '': {}, shared: {}, 'node_modules/a': { version: '1.0.0' }, 'node_modules/b': { version: '2.0.0', optional: true } } };
  writeFileSync(file('package-lock.json'), JSON.stringify(lock));
  expect(outdatedPackage(folder)).toBe('node_modules');
  mkdirSync(file('node_modules'));
  const install = (/** @type {object} */ packages) => writeFileSync(file('node_modules/.package-lock.json'), JSON.stringify({ packages }));
  install({ 'node_modules/a': { version: '0.9.0' } });
  expect(outdatedPackage(folder)).toBe('node_modules/a');
  install({ 'node_modules/a': { version: '1.0.0' } });
  expect(outdatedPackage(folder)).toBeUndefined();
});

test('a wrong PG_BIN is named', () => {
  expect(() => findPostgres('/nowhere')).toThrow('PG_BIN is /nowhere, but there is no initdb in it.');
});

describe('reports', () => {
  const report = (/** @type {unknown} */ testResults, /** @type {number | string} */ code = 0) => {
    writeFileSync(file('report.json'), JSON.stringify({ testResults }));
    return readReport(file('report.json'), code, '/r/');
  };
  const pass = { status: 'passed', fullName: 'works' };

  test('passes, failures and skips are counted by name', () => {
    const all = report([{ name: '/r/a.ts', status: 'failed', assertionResults: [pass, { status: 'failed', fullName: 'breaks' }, { status: 'pending', fullName: 'waits' }, { status: 'todo', fullName: 'later' }] }], 1);
    expect(all).toEqual({ passed: 1, failed: ['a.ts › breaks'], skipped: ['a.ts › waits', 'a.ts › later'] });
  });

  test('what is not a pass is a failure', () => {
    rmSync(file('report.json'), { force: true });
    expect(readReport(file('report.json'), 'SIGKILL', '/r/').failed).toEqual(['no report was written (SIGKILL)']);
    writeFileSync(file('report.json'), '{"testRes');
    expect(readReport(file('report.json'), 1, '/r/').failed).toEqual(['no report was written (1)']);
    expect(report([]).failed).toEqual(['no test was run']);
    expect(report([{ name: '/r/a.ts', status: 'passed', assertionResults: [pass] }, { name: '/r/b.ts', status: 'failed', assertionResults: [] }], 1)).toMatchObject({ passed: 1, failed: ['b.ts could not be run'] });
    expect(report([{ name: '/r/a.ts', status: 'passed', assertionResults: [pass] }], 1)).toMatchObject({ passed: 1, failed: ['ended with 1 although no test failed'] });
    expect(readFileSync(file('report.json'), 'utf8')).toContain('works');
  });
});
