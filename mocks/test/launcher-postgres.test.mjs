import { fork, spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { identity, pause } from '../lib/processes.mjs';
import { startPostgres } from '../postgres.mjs';

const folder = mkdtempSync(path.join(tmpdir(), 'tallypole-pg-'));
const dir = path.join(folder, 'pg');
/** @type {import('../postgres.mjs').Postgres} */
let pg;
/** @param {import('../postgres.mjs').Role} role @param {string} sql */
const as = (role, sql) => pg.psql('tally', sql, {}, role);

beforeAll(async () => {
  pg = await startPostgres({ dir });
  pg.createDatabase('tally');
  as('tally_owner', 'create table kept (word text); grant select, insert on kept to app_read, app_write, app_worker');
});

afterAll(async () => {
  await pg.stop();
  rmSync(pg.base, { recursive: true, force: true });
  rmSync(folder, { recursive: true, force: true });
});

test('a cluster for data is durable, has checksums, listens on loopback only and asks for passwords', () => {
  const settings = pg.psql('postgres', 'show fsync; show full_page_writes; show synchronous_commit; show data_checksums; show listen_addresses; show max_connections; show timezone');
  expect(settings.split('\n')).toEqual(['on', 'on', 'on', 'on', '127.0.0.1', '100', 'UTC']);
  expect(pg.psql('postgres', 'select distinct auth_method from pg_hba_file_rules')).toBe('scram-sha-256');
  const stranger = { ...pg.address.passwords };
  pg.address.passwords['app_read'] = 'wrong';
  expect(() => as('app_read', 'select 1')).toThrow(/password authentication failed/);
  Object.assign(pg.address.passwords, stranger);
});

test('the reading role cannot write, even where it was granted to', () => {
  expect(() => as('app_read', `insert into kept values ('x')`)).toThrow(/read-only transaction/);
  expect(as('app_read', 'show transaction_isolation')).toBe('repeatable read');
  expect(as('app_write', 'show transaction_isolation')).toBe('read committed');
});

test.each(/** @type {const} */ (['app_read', 'app_write', 'app_worker']))('the limits of %s apply', (role) => {
  const shown = as(role, 'show statement_timeout; show lock_timeout; show idle_in_transaction_session_timeout');
  expect(shown.split('\n')).toEqual(['10s', '3s', '15s']);
});

test('a writer that waits for a lock gives up after three seconds', async () => {
  const holder = spawn(path.join(pg.address.bin, 'psql'), [pg.superUrl('tally'), '-Xqc', 'begin; lock table kept; select pg_sleep(20)'], { stdio: 'ignore' });
  while (pg.psql('tally', `select count(*) from pg_locks where relation = 'kept'::regclass and granted`) === '0') await pause(20);
  const begun = Date.now();
  expect(() => as('app_write', `insert into kept values ('x')`)).toThrow(/lock timeout/);
  expect(Date.now() - begun).toBeGreaterThan(2900);
  pg.psql('tally', `select pg_terminate_backend(pid) from pg_stat_activity where query like '%pg_sleep(20)%' and pid <> pg_backend_pid()`);
  await once(holder, 'exit');
});

test('only the owner bypasses row-level security, and no role is more than it needs to be', () => {
  const rows = pg.psql('postgres', `select rolname, rolbypassrls from pg_roles where rolcanlogin and rolname <> 'postgres' and not (rolsuper or rolcreatedb or rolcreaterole or rolreplication) order by 1`);
  expect(rows.split('\n')).toEqual(['app_read|f', 'app_worker|f', 'app_write|f', 'queue_owner|f', 'tally_owner|t']);
});

test('databases: owner, who may connect, the schema of the queue; a clone has the same', () => {
  pg.createDatabase('clone', 'tally');
  for (const database of ['tally', 'clone']) {
    expect(pg.psql(database, 'select datdba::regrole from pg_database where datname = current_database()')).toBe('tally_owner');
    expect(pg.psql(database, 'create schema queue; drop schema queue; select 1', {}, 'queue_owner')).toBe('1');
    expect(() => pg.psql(database, 'create schema own', {}, 'app_write')).toThrow(/permission denied/);
    expect(() => pg.psql(database, 'create table own ()', {}, 'app_write')).toThrow(/permission denied/);
  }
  expect(pg.psql('clone', 'select count(*) from kept')).toBe('0');
  pg.createDatabase('clone'); // it is there: nothing happens
  pg.dropDatabase('clone');
  expect(() => pg.psql('clone', 'select 1')).toThrow(/does not exist/);
});

test('roles.sql can run again', () => {
  pg.makeRoles();
  expect(as('app_write', 'select current_user')).toBe('app_write');
});

test('what was committed survives kill -9 of the server; port and passwords stay', async () => {
  as('app_write', `insert into kept values ('before the kill')`);
  await pg.kill();
  expect(() => as('app_write', 'select 1')).toThrow(/refused/);
  await pg.start();
  expect(as('app_write', 'select word from kept')).toBe('before the kill');
});

test('a stale postmaster.pid of a living stranger is not taken for the server', async () => {
  await pg.kill();
  const file = path.join(pg.base, 'data/postmaster.pid');
  const lines = readFileSync(file, 'utf8').split('\n');
  writeFileSync(file, [process.pid, ...lines.slice(1)].join('\n'));
  const again = await startPostgres({ dir });
  expect(again.reused).toBe(false);
  expect(await again.stop()).toBe(false); // the first start still needs it
  expect(as('app_write', 'select count(*) from kept')).toBe('1');
});

test('who starts second finds the running server, and the first one to leave does not stop it', async () => {
  const other = fork(path.join(import.meta.dirname, 'support/hold-postgres.mjs'), [dir], { stdio: ['ignore', 'ignore', 'inherit', 'ipc'] });
  const [told] = await once(other, 'message');
  expect(told).toMatchObject({ port: pg.port, reused: true });
  other.send('stop');
  const [stopped] = await once(other, 'message');
  expect(stopped).toEqual({ stopped: false });
  expect(as('app_write', 'select 1')).toBe('1');
});

test('a server whose starter is killed with -9 stops by itself', async () => {
  const own = path.join(folder, 'orphan');
  const starter = fork(path.join(import.meta.dirname, 'support/hold-postgres.mjs'), [own], { stdio: ['ignore', 'ignore', 'inherit', 'ipc'] });
  const [told] = await once(starter, 'message');
  const pid = Number(readFileSync(path.join(told.base, 'data/postmaster.pid'), 'utf8').split('\n')[0]);
  expect(identity(pid)).toBeDefined();
  starter.kill('SIGKILL');
  for (let i = 0; identity(pid) && i < 100; i += 1) await pause(100);
  expect(identity(pid)).toBeUndefined();
  rmSync(told.base, { recursive: true });
});
