import { afterAll, afterEach, beforeAll, describe, expect, it } from '@jest/globals';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import pg from 'pg';
import { LIMITS } from '../src/common/rate-limit.guard.ts';
import { jobInput, principalWithFirm } from './support/builders.ts';
import { House, until, type WebProcess } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const api = path.join(import.meta.dirname, '..');
const developers = readFileSync(path.join(api, '../DEVELOPERS.md'), 'utf8');

describe('readiness', () => {
  let house: House;
  let url: string;
  beforeAll(async () => {
    house = await House.open();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());
  const ask = async (where: string, at = url) => {
    const answer = await fetch(`${at}/api/health${where}`);
    return { status: answer.status, body: (await answer.json()) as object };
  };

  it('is said while database, migrations and queue are there', async () => {
    expect(await ask('/ready')).toEqual({ status: 200, body: { status: 'ready', queueWaitingSeconds: 0 } });
    // nobody works here: a job waits
    await new Visitor(house, url, 'ann@people.example').post('/auth/codes', { email: 'ann@people.example' }, null);
    await until(async () => ((await ask('/ready')).body as { queueWaitingSeconds: number }).queueWaitingSeconds >= 1, 'the job to wait');
  });

  it('is refused while a migration is missing, with its name; the process is alive all the same', async () => {
    const [last] = await house.sql<{ name: string; sha256: string }>('delete from migration where name = (select max(name) from migration) returning name, sha256');
    const { url: at } = await house.web({ alive: true });
    expect(await ask('/ready', at)).toMatchObject({ status: 503, body: { code: 'busy', detail: `Migrations are missing: ${last?.name}.` } });
    expect(await ask('', at)).toEqual({ status: 200, body: { status: 'ok' } });
    await house.sql('insert into migration (name, sha256) values ($1, $2)', [last?.name, 'edited']);
    expect((await ask('/ready', at)).status).toBe(503);
    await house.sql('update migration set sha256 = $2 where name = $1', [last?.name, last?.sha256]);
    expect((await ask('/ready', at)).status).toBe(200);
  });

  it('is refused while the queue cannot be used', async () => {
    await house.asQueueOwner('revoke usage on schema graphile_worker from app_write');
    expect(await ask('/ready')).toMatchObject({ status: 503, body: { code: 'busy', detail: 'The queue cannot be reached.' } });
    await house.asQueueOwner('grant usage on schema graphile_worker to app_write');
    expect((await ask('/ready')).status).toBe(200);
  });

  it('is refused while the database turns everybody away; the process is alive all the same', async () => {
    house.disconnect('app_read', false);
    expect(await ask('/ready')).toMatchObject({ status: 503, body: { code: 'busy', detail: 'The database does not answer.' } });
    expect(await ask('')).toEqual({ status: 200, body: { status: 'ok' } });
    house.disconnect('app_read', true);
    await until(async () => (await ask('/ready')).status === 200, 'the server to be ready again');
  });
});

describe('a stop', () => {
  let house: House;
  beforeAll(async () => {
    house = await House.open();
    await house.worker();
  });
  afterAll(() => house.close());

  it('finishes what runs, takes nothing new and ends', async () => {
    const { url, child }: WebProcess = await house.web({ env: { DATABASE_POOL: '10' } });
    const { principal, firmId } = await principalWithFirm(house, url);
    // everybody who creates a job of this firm waits for its row
    const holder = new pg.Client({ connectionString: house.ownerUrl });
    await holder.connect();
    await holder.query('begin');
    await holder.query('select 1 from firm where id = $1 for update', [firmId]);
    const inputs = Array.from({ length: 6 }, () => jobInput(firmId));
    const answers = inputs.map((input) => principal.post('/jobs', input));
    await until(async () => (await house.sql<{ n: number }>(`select count(*)::int as n from pg_locks where not granted and pid in (select pid from pg_stat_activity where datname = current_database())`))[0]?.n === 6, 'six requests to wait');
    const gone = new Promise<number | null>((done) => child.once('exit', (code, signal) => done(code ?? (signal === 'SIGTERM' ? 0 : 1))));
    child.kill('SIGTERM');
    await until(() => fetch(`${url}/api/health`).then(() => false, () => true), 'the door to close');
    await holder.query('commit');
    await holder.end();
    expect((await Promise.all(answers)).map(({ status }) => status)).toEqual(inputs.map(() => 201));
    expect(await gone).toBe(0);
    expect(await house.sql<{ n: number }>('select count(*)::int as n from job where firm_id = $1', [firmId])).toEqual([{ n: 6 }]);
  });

  it('of a worker lets its jobs end and others go on', async () => {
    const { url } = await house.web();
    const visitor = new Visitor(house, url, 'late@people.example');
    const second = await house.worker();
    const gone = new Promise((done) => second.once('exit', (code) => done(code)));
    second.kill('SIGTERM');
    expect(await gone).toBe(0);
    await visitor.signIn();
  });
});

describe('limits', () => {
  let house: House;
  let log: string;
  let servers: WebProcess[];
  beforeAll(async () => {
    house = await House.open({ LOG_LEVEL: 'warn' });
    log = path.join(house.folder, 'web.log');
    servers = [await house.web({ logTo: log }), await house.web({ logTo: log })];
  });
  afterEach(() => house.sql('delete from rate_limit'));
  afterAll(() => house.close());

  it('stand in DEVELOPERS.md as they are', () => {
    const shown = [...developers.matchAll(/^\| `([a-z_]+)` \| (none|(\d+) in (\d+) s) \|/gm)].map(([, name = '', , hits, seconds]) => [name, hits === undefined ? null : { hits: Number(hits), seconds: Number(seconds) }]);
    expect(Object.fromEntries(shown)).toEqual(LIMITS);
  });

  it('are counted by all servers together, say when to come back, and are logged once', async () => {
    const { hits = 0, seconds = 0 } = LIMITS.sign_in ?? {};
    const tries = Array.from({ length: hits + 6 }, (_, i) => new Visitor(house, servers[i % 2]?.url ?? '', `t${i}@people.example`).post('/auth/sessions', { email: `t${i}@people.example`, code: '000000' }, null));
    const answers = await Promise.all(tries);
    const refused = answers.filter(({ status }) => status === 429);
    expect(refused).toHaveLength(6);
    for (const { headers, body } of refused) {
      const wait = Number(headers['retry-after']);
      expect(wait >= 1 && wait <= seconds).toBe(true);
      expect(body).toMatchObject({ code: 'too_many_tries', detail: expect.stringMatching(/^Too many tries\. Wait \d+ (seconds?|minutes) and try again\.$/) as unknown });
    }
    const lines = readFileSync(log, 'utf8').split('\n').filter((line) => line.includes('rate limit passed')).map((line) => JSON.parse(line) as object);
    expect(lines).toEqual([expect.objectContaining({ level: 40, limit: 'sign_in', address: '127.0.0.1', requestId: expect.any(String) as unknown })]);
  });

  it('of an address are logged without it', async () => {
    const visitor = new Visitor(house, servers[0]?.url ?? '', 'somebody@people.example');
    for (let i = 0; i < 7; i += 1) await visitor.post('/auth/codes', { email: visitor.email }, null);
    const text = readFileSync(log, 'utf8');
    expect(text).toContain('"limit":"code"');
    expect(text).not.toContain('somebody');
  });
});

describe('what is kept for a time only', () => {
  let house: House;
  beforeAll(async () => {
    house = await House.open();
  });
  afterAll(() => house.close());

  /** Makes an old row and a younger one of each kind, as they were so many days ago. */
  const rows = async (what: string, days: readonly number[], sql: string) => {
    for (const age of days) await house.sql(sql, [age]);
    return what;
  };
  const ago = '(now() - make_interval(days => $1::int))';

  it('goes when its time is over, and not before', async () => {
    const { url } = await house.web();
    const worker = await house.worker();
    const { principal, firmId } = await principalWithFirm(house, url);
    await house.kill(worker);
    const [me] = await house.sql<{ id: string }>('select id from person where email = $1', [principal.email]);
    for (const table of ['command', 'sign_in_code', 'notice']) await house.sql(`delete from ${table}`);
    await house.sql('delete from rate_limit');
    await rows('rate counters', [2, 0], `insert into rate_limit values ('write:old', date_trunc('second', ${ago}), 1)`);
    await rows('sign-in codes', [2, 0], `insert into sign_in_code (id, email, created_at, expires_at) values (gen_random_uuid(), 'a@b.example', ${ago}, ${ago})`);
    await rows('idempotency keys', [31, 29], `insert into command (actor_id, operation, key, input_hash, answer, created_at) values ('${me?.id}', 'x', gen_random_uuid(), '\\x00', '{}', ${ago})`);
    const session = (ended: string) => `insert into session (id, person_id, refresh_hash, rotated_at, present_at, user_agent, created_at, expires_at, ended_at)
      select gen_random_uuid(), '${me?.id}', sha256(gen_random_uuid()::text::bytea), now(), now(), 'old', now(), ${ended}`;
    await rows('signed out', [31, 29], session(`now() + interval '9 days', ${ago}`));
    await rows('run out', [31, 29], session(`${ago}, null`));
    await rows('events', [91, 89], `insert into stripe_event (account, id, type, object_id, created_at, received_at, via, handled_at) values ('acct', gen_random_uuid()::text, 't', 'o', ${ago}, ${ago}, 'webhook', ${ago})`);
    await rows('unhandled events', [400], `insert into stripe_event (account, id, type, object_id, created_at, received_at, via) values ('acct', gen_random_uuid()::text, 't', 'o', ${ago}, ${ago}, 'webhook')`);
    const notice = (sent: string) => `insert into notice (id, firm_id, kind, to_email, to_name, data, created_at, sent_at) values (gen_random_uuid(), '${firmId}', 'invitation', 'guest@people.example', 'Pat Rowe', '{"a":1}', ${ago}, ${sent})`;
    await rows('mails', [91, 89], notice(ago));
    await rows('mails that never went out', [400], notice('null'));

    await house.worker();
    await house.asQueueOwner(`select graphile_worker.add_job('sweep_old', '{}')`);
    const left = async () => (await house.sql<Record<string, number>>(`select
      (select count(*)::int from rate_limit where key = 'write:old') as counters, (select count(*)::int from sign_in_code) as codes, (select count(*)::int from command) as keys,
      (select count(*)::int from session where user_agent = 'old') as sessions, (select count(*)::int from stripe_event) as events,
      (select count(*)::int from notice) as mails, (select count(*)::int from notice where data <> '{}' and to_name = 'Pat Rowe') as bodies`))[0];
    await until(async () => (await left())?.['bodies'] === 2, 'the sweep');
    expect(await left()).toEqual({ counters: 1, codes: 1, keys: 1, sessions: 2, events: 2, mails: 3, bodies: 2 });
    expect(await house.sql(`select to_email from notice where data = '{}'`)).toEqual([{ to_email: '' }]);
    // who is signed in stays so
    expect((await principal.get('/me')).status).toBe(200);
  });
});
