import { spawnSync } from 'node:child_process';
import path from 'node:path';
import { NestFactory } from '@nestjs/core';
import type { INestApplicationContext } from '@nestjs/common';
import { connect } from '../../../mocks/postgres.mjs';
import { PaymentSettlement } from '../../src/payments/payment-settlement.ts';
import { StripeClient } from '../../src/payments/stripe-client.ts';
import type { PaymentFacts, SessionFacts } from '../../src/payments/stripe-facts.ts';
import { approvedDraw, ledgerState, lentJob, type LentJob } from '../support/draw-builders.ts';
import { House } from '../support/house.ts';
import { multiply } from './multiply.ts';
import { byTurns, note, timed } from './rows.ts';

const CLIENTS = 8;
const PAYMENTS = 400;
const SECONDS = 4;

describe('a settled payment', () => {
  let house: House;
  let app: INestApplicationContext;
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
    Object.assign(process.env, house.env);
    const { WorkerModule } = await import('../../src/worker.module.ts');
    app = await NestFactory.createApplicationContext(WorkerModule, { logger: false });
    // Stripe answers at once, since its speed is not what is measured
    Object.assign(app.get(StripeClient), { session: (_: string, id: string) => Promise.resolve(session(id)), payment: (_: string, id: string) => Promise.resolve(settled(id)) });
    server.createDatabase('pgbench', 'template1');
    pgbench('-i', '-s', '10', '-q');
  });
  afterAll(async () => {
    await app.close();
    server.dropDatabase('pgbench');
    await house.close();
  });

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
    const settlement = app.get(PaymentSettlement);
    const waiting = payments.sort((a, b) => a.id.localeCompare(b.id));
    const took = await timed(() => Promise.all(Array.from({ length: CLIENTS }, async () => {
      for (let next = waiting.pop(); next; next = waiting.pop()) await settlement.check(next.firm, next.id);
    })));
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

const session = (id: string): SessionFacts => ({ id, status: 'complete', url: null, expiresAt: new Date('2099-01-01'), intentId: id.replace('cs_', 'pi_'), paymentId: id.slice('cs_'.length) });
const settled = (intentId: string): PaymentFacts => ({ intentId, paymentId: intentId.slice('pi_'.length), status: 'succeeded', attempted: true, receivedCents: 1, feeCents: 0, failure: null, failureCode: null, refunds: [], disputes: [] });
