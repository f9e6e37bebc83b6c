// `npm start`: brings the whole of Tallypole up on this machine; `npm run dev` (--watch) rebuilds and restarts on change.
// Plain Node, no dependency: it runs before npm ci has.
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { build } from './lib/build.mjs';
import { mustSucceed, root, runNode } from './lib/children.mjs';
import { readEnvFile } from './lib/env-file.mjs';
import { Failure } from './lib/failure.mjs';
import { House } from './lib/house.mjs';
import { requireNode, requirePackages } from './lib/packages.mjs';
import { requireFreePorts } from './lib/ports.mjs';
import { pause } from './lib/processes.mjs';
import { secretsIn } from './lib/secrets.mjs';
import { portsOf, readSettings } from './lib/settings.mjs';
import { startStandIns, storageStandIn } from './lib/stand-ins.mjs';
import { watchSources } from './lib/watch.mjs';
import { welcome } from './lib/welcome.mjs';
import { startPostgres } from './postgres.mjs';

const data = path.join(root, '.data');
const inData = (/** @type {string} */ name) => path.join(data, name);
const watch = process.argv.includes('--watch');
const house = new House();

try {
  requireNode();
  const settings = readSettings(readEnvFile(path.join(root, '.env')), process.env);
  const ports = portsOf(settings, watch);
  mkdirSync(data, { recursive: true });
  const { stale } = house.own(inData('launcher.lock'));
  await requireFreePorts(Object.values(ports), stale ? 10_000 : 0);

  const [pg] = await sideBySide(
    startDatabase(settings),
    requirePackages(house.say, house.watchOver),
  );
  await build(house.say, watch ? ['api'] : ['api', 'portal'], house.watchOver);
  const env = environment(settings, ports, pg);
  pg.createDatabase('tally');
  await migrate(pg, env);
  // before the demo, which keeps its pictures where files are kept
  await startStandIns(house, { ports, env, data });
  if (settings['DEMO'] !== 'false') await seed(pg, env);
  const start = () => {
    house.service('web server', ['--enable-source-maps', 'api/dist/web.js'], { env, mayEnd: watch });
    house.service('worker', ['--enable-source-maps', 'api/dist/worker.js'], { env, mayEnd: watch });
  };
  start();
  await healthy(ports.web.port);
  if (watch) await watchSources(house, { ports, start, migrate: () => migrate(pg, env) });
  if (!house.stopping) console.log(await welcome({ ports, env, settings }));
} catch (error) {
  await house.fail(error);
}

/** @param {Record<string, string>} settings */
async function startDatabase(settings) {
  const port = settings['POSTGRES_PORT'];
  const starting = startPostgres({
    dir: inData('postgres'),
    ...(settings['PG_BIN'] ? { bin: settings['PG_BIN'] } : {}),
    ...(port ? { port: Number(port) } : {}),
    say: house.say,
  });
  house.atEnd(() => starting.then((pg) => pg.stop(), () => {}));
  const pg = await starting;
  house.say(`PostgreSQL on 127.0.0.1:${pg.port}${pg.reused ? ' (was still running)' : ''}`);
  return pg;
}

/**
 * @param {Record<string, string>} settings
 * @param {ReturnType<typeof portsOf>} ports
 * @param {import('./postgres.mjs').Postgres} pg
 */
function environment(settings, ports, pg) {
  const secrets = secretsIn(inData('secrets.json'));
  const at = (/** @type {number} */ port) => `http://127.0.0.1:${port}`;
  return {
    NODE_ENV: 'development',
    ...secrets,
    PUBLIC_URL: at((ports.dev ?? ports.web).port),
    MAIL_FROM: 'tallypole@example.com',
    DEMO: 'true',
    LOG_LEVEL: 'warn',
    ...(ports.smtp && ports.mailPage ? { SMTP_URL: `smtp://127.0.0.1:${ports.smtp.port}`, MAIL_PAGE_URL: at(ports.mailPage.port) } : {}),
    ...(ports.stripe ? { STRIPE_API_URL: at(ports.stripe.port) } : {}),
    ...(ports.storage ? storageStandIn(ports.storage.port) : {}),
    ...settings,
    PORT: String(ports.web.port),
    FILES_DIR: settings['FILES_DIR'] ? path.resolve(root, settings['FILES_DIR']) : inData('files'),
    PORTAL_DIST: path.join(root, 'portal/dist'),
    DATABASE_WRITE_URL: pg.url('app_write', 'tally'),
    DATABASE_READ_URL: pg.url('app_read', 'tally'),
    DATABASE_WORKER_URL: pg.url('app_worker', 'tally'),
    QUEUE_URL: pg.url('queue_owner', 'tally'),
  };
}

/**
 * @param {import('./postgres.mjs').Postgres} pg
 * @param {Record<string, string>} env
 */
async function seed(pg, env) {
  house.say('looking after the demo');
  const ownerEnv = { ...env, DATABASE_OWNER_URL: pg.url('tally_owner', 'tally') };
  mustSucceed('Seeding the demo', await runNode(['api/dist/database/seed.js'], { env: ownerEnv, onStart: house.watchOver }));
}

/**
 * Only migrations act as the owner, who sees everything; web and worker never get that address.
 * @param {import('./postgres.mjs').Postgres} pg
 * @param {Record<string, string>} env
 */
async function migrate(pg, env) {
  const ownerEnv = { ...env, DATABASE_OWNER_URL: pg.url('tally_owner', 'tally') };
  const done = await runNode(['api/dist/database/migrate.js'], { env: ownerEnv, onStart: house.watchOver });
  // the program says in one line what is wrong, an edited migration included
  if (done.code !== 0) throw new Failure(done.errors.trim() || done.output.trim() || `The migration failed (${done.code}).`);
}

/** @param {number} port */
async function healthy(port) {
  for (const until = Date.now() + 60_000; !house.stopping; await pause(100)) {
    const answer = await fetch(`http://127.0.0.1:${port}/api/health/ready`, { signal: AbortSignal.timeout(2000) }).catch(() => undefined);
    if (answer?.ok) return;
    if (Date.now() > until) throw new Failure('The web server did not become ready within a minute.');
  }
}

/**
 * Waits for both, so that a failure of one does not leave the other half done behind our back.
 * @template A, B
 * @param {Promise<A>} a
 * @param {Promise<B>} b
 * @returns {Promise<[A, B]>}
 */
async function sideBySide(a, b) {
  const [first, second] = await Promise.allSettled([a, b]);
  if (first.status === 'rejected') throw first.reason;
  if (second.status === 'rejected') throw second.reason;
  return [first.value, second.value];
}
