import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { startPostgres } from '../../../mocks/postgres.mjs';

const api = path.join(import.meta.dirname, '../..');
const TEMPLATE = 'tally_template';

export type OwnPostgres = Awaited<ReturnType<typeof startPostgres>> & { template: string; leave: () => Promise<void>; remove: () => Promise<void> };

/** A server that a test may kill: its own, durable as a real one, with a migrated template. */
export async function ownPostgres(): Promise<OwnPostgres> {
  const server = await startPostgres({ dir: path.join(tmpdir(), `tally-own-pg-${process.pid}`) });
  server.createDatabase(TEMPLATE);
  const env = { PATH: process.env['PATH'], DATABASE_OWNER_URL: server.url('tally_owner', TEMPLATE), QUEUE_URL: server.url('queue_owner', TEMPLATE) };
  const migrated = spawnSync(process.execPath, ['dist/database/migrate.js'], { cwd: api, env, encoding: 'utf8' });
  if (migrated.status !== 0) throw new Error(migrated.stderr);
  const remove = async () => {
    await server.stop('immediate');
    rmSync(server.base, { recursive: true, force: true });
  };
  /** A fast shutdown, during which this process goes on; `start` brings it back. */
  const leave = async () => {
    const pidFile = path.join(server.base, 'data/postmaster.pid');
    process.kill(Number(readFileSync(pidFile, 'utf8').split('\n')[0]), 'SIGINT');
    while (existsSync(pidFile)) await new Promise((done) => setTimeout(done, 20));
  };
  return { ...server, template: TEMPLATE, leave, remove };
}
