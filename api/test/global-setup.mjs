import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import path from 'node:path';
import { testPostgres } from '../../mocks/postgres.mjs';

const api = fileURLToPath(new URL('..', import.meta.url));
const TEMPLATE = 'tally_template';

/** Builds the server, migrates a template database, and tells the test files where to find both. */
export default async function setup() {
  run(process.execPath, [path.join(api, '../node_modules/typescript/bin/tsc'), '-b', 'tsconfig.build.json'], {});
  const server = await testPostgres();
  server.dropDatabase(TEMPLATE);
  server.createDatabase(TEMPLATE);
  run(process.execPath, ['dist/database/migrate.js'], {
    DATABASE_OWNER_URL: server.url('tally_owner', TEMPLATE),
    QUEUE_URL: server.url('queue_owner', TEMPLATE),
  });
  process.env.TEST_PG = JSON.stringify(server.address);
  process.env.TEST_TEMPLATE = TEMPLATE;
  globalThis.__testPostgres = server;
}

function run(program, args, env) {
  const done = spawnSync(program, args, { cwd: api, env: { PATH: process.env.PATH, HOME: process.env.HOME, ...env }, encoding: 'utf8' });
  if (done.status !== 0) throw new Error(`${args.join(' ')}: ${done.stdout}${done.stderr}`);
}
