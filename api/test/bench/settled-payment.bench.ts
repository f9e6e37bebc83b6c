import { fork, spawnSync, type ChildProcess } from 'node:child_process';
import path from 'node:path';
import { connect } from '../../../mocks/postgres.mjs';
import { approvedDraw, ledgerState, lentJob, type LentJob } from '../support/draw-builders.ts';
import { House } from '../support/house.ts';
import { multiply } from './multiply.ts';
import { byTurns, note } from './rows.ts';

const CLIENTS = 8;
const PAYMENTS = 400;
const SECONDS = 4;

describe('a settled payment', () => {
  let house: House;
  let settling: ChildProcess | undefined;
  let lent: LentJob;
  const server = connect(JSON.parse(process.env['TEST_PG'] ?? '{}') as Parameters<typeof connect>[0]);

  beforeAll(async () => {
    house = await House.open({ DATABASE_POOL: String(CLIENTS) });
    const { url } = await house.web();
    const worker = await house.worker();
    lent = await lentJob(house, url);
    await approvedDraw(lent);
    await house.kill(worker);
    await multiply(house, lent.firmId, CLIENTS - 1, 1);
    // one payment at a time is the rule for people; here they are many, of a cent each
    await house.sql('drop index one_payment_under_way');
    settling = fork(path.join(import.meta.dirname, 'settle-payments.mjs'), { execArgv: [], env: house.env });
    await answer();
    server.createDatabase('pgbench', 'template1');
    pgbench('-i', '-s', '10', '-q');
  });
  afterAll(async () => {
    settling?.disconnect();
    server.dropDatabase('pgbench');
    await house.close();
  });

  const answer = () => new Promise<{ took: number }>((done, fail) => settling?.once('message', (message) => done(message as { took: number })).once('exit', (code) => fail(new Error(`It ended with ${code}.`))));
  const pgbench = (...args: string[]): string => {
    const { bin, port, passwords } = server.address;
    const done = spawnSync(path.join(bin, 'pgbench'), [...args, '-h', '127.0.0.1', '-p', String(port), '-U', 'postgres', 'pgbench'], { env: { PGPASSWORD: passwords['postgres'] }, encoding: 'utf8' });
    if (done.status !== 0) throw new Error(done.stderr);
    return done.stdout;
  };
  const theirs = () => Promise.resolve(Number(/tps = ([\d.]+)/.exec(pgbench('-c', String(CLIENTS), '-j', '2', '-T', String(SECONDS), '-n'))?.[1]));

  /** Payments per second, each checked, booked, recorded and told, over so many jobs. */
  const ours = (jobs: number) => async () => {
    const payments = await house.sql<{ id: string; firm: string }>(
      `insert into payment (firm_id, job_id, id, draw_id, method, source, state, amount_cents, started_on, account, session_id, intent_id, payer_id, created_at)
       select d.firm_id, d.job_id, p.id, d.id, 'checkout', 'homeowner', 'processing', 1, '2026-11-30', 'acct_' || p.id, 'cs_' || p.id, 'pi_' || p.id, (select id from person where email = $1), now()
       from (select *, row_number() over (order by id) as n from draw where approved_at is not null limit $2) d,
         lateral (select gen_random_uuid() as id from generate_series(1, $3::int / $2::int) where d.n is not null) p
       returning id, firm_id as firm`,
      [lent.ann.email, jobs, PAYMENTS],
    );
    settling?.send({ payments: payments.sort((a, b) => a.id.localeCompare(b.id)), clients: CLIENTS });
    const { took } = await answer();
    return (PAYMENTS / took) * 1_000;
  };

  it.each([['over eight jobs', CLIENTS, 0.25], ['all on one job', 1, 0.18]] as const)('%s', async (where, jobs, least) => {
    await ours(jobs)();
    const [settlements, transactions] = await byTurns(3, ours(jobs), theirs);
    const ratio = settlements / transactions;
    note({ what: `settled payments ${where}, ${CLIENTS} at a time`, against: 'TPC-B-like transactions of pgbench on the same server', ratio, target: `≥ ${least}`, met: ratio >= least, seen: `${Math.round(settlements)} and ${Math.round(transactions)}/s` });
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0 });
    expect(await house.sql(`select count(*)::int as n from payment where state = 'processing'`)).toEqual([{ n: 0 }]);
  });
});
