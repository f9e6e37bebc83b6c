import { spawn } from 'node:child_process';
import path from 'node:path';
import { Refusal } from './command.ts';

const QUEUE_SCHEMA = 'graphile_worker';

/** Dumps one owner's part of a database as it was at a snapshot. The rate counters are unlogged: they are worth nothing elsewhere. */
export const dump = (part: 'app' | 'queue', url: string, file: string, snapshot: string): Promise<void> =>
  run('pg_dump', url, ['--format=custom', `--file=${file}`, `--snapshot=${snapshot}`, '--no-unlogged-table-data', part === 'queue' ? `--schema=${QUEUE_SCHEMA}` : `--exclude-schema=${QUEUE_SCHEMA}`]);

/** Fills an empty part of a database, wholly or not at all. */
export const fill = (url: string, file: string): Promise<void> => run('pg_restore', url, ['--exit-on-error', '--single-transaction', '--no-owner', file]);

/** PG_BIN names the folder of PostgreSQL's programs where they are not in the path. */
function run(program: string, url: string, args: string[]): Promise<void> {
  const { hostname, port, username, password, pathname } = new URL(url);
  const bin = process.env['PG_BIN'];
  return new Promise((done, fail) => {
    // the password not among the arguments, where everybody on the machine could read it
    const child = spawn(bin ? path.join(bin, program) : program, ['--host', hostname, '--port', port || '5432', '--username', decodeURIComponent(username), '--dbname', pathname.slice(1), ...args], {
      env: { PATH: process.env['PATH'], PGPASSWORD: decodeURIComponent(password), PGCONNECT_TIMEOUT: '10' },
      stdio: ['ignore', 'ignore', 'pipe'],
    });
    let errors = '';
    child.stderr.on('data', (text: Buffer) => (errors += text.toString()));
    child.once('error', (error) => fail(new Refusal(`${program} could not be started: ${error.message}. PG_BIN names the folder of PostgreSQL's programs.`)));
    child.once('close', (code) => (code === 0 ? done() : fail(new Refusal(`${program} failed: ${errors.trim()}`))));
  });
}
