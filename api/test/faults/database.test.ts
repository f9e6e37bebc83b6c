import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import { v7 } from 'uuid';
import { createJob, jobInput, principalWithFirm } from '../support/builders.ts';
import { operate } from '../support/commands.ts';
import { approvedDraw, drawAt, ledgerState, lentJob, made } from '../support/draw-builders.ts';
import { House, until } from '../support/house.ts';
import { ownPostgres, type OwnPostgres } from '../support/own-postgres.ts';
import { StallingProxy } from '../support/stalling-proxy.ts';
import type { Visitor } from '../support/visitor.ts';

const LONG = 60_000;
const jobs = async (house: House, firmId: string) => (await house.sql<{ n: number }>('select count(*)::int as n from job where firm_id = $1', [firmId]))[0]?.n;

describe('a database that is killed and comes back', () => {
  let server: OwnPostgres;
  let house: House;
  let principal: Visitor;
  let firmId: string;
  let urls: string[];

  beforeAll(async () => {
    server = await ownPostgres();
    house = await House.open({ LOG_LEVEL: 'silent' }, { server, template: server.template });
    await house.worker();
    urls = [(await house.web()).url, (await house.web()).url];
    ({ principal, firmId } = await principalWithFirm(house, urls[0] ?? ''));
  });
  afterAll(async () => {
    await house.close();
    await server.remove();
  });

  /** Sends until it is acknowledged, always with the same key; whatever else is answered must say that it may be sent again. */
  async function acknowledged(at: string, refusals: string[]): Promise<void> {
    const [input, key] = [jobInput(firmId), randomUUID()];
    for (const end = Date.now() + LONG; Date.now() < end; await new Promise((done) => setTimeout(done, 100))) {
      const answer = await principal.at(at).post('/jobs', input, key);
      if (answer.status === 201) return;
      const { code } = answer.body as { code: string };
      refusals.push(code);
      expect([answer.status, answer.headers['content-type'], Number(answer.headers['retry-after']) > 0, ['busy', 'unclear'].includes(code)]).toEqual([503, 'application/problem+json; charset=utf-8', true, true]);
    }
    throw new Error('It was never acknowledged.');
  }

  it.each([
    ['killed', () => server.kill()],
    ['shut down in good order', () => server.leave()],
  ])('loses nothing that was acknowledged and does nothing twice when it is %s in the middle', async (_how, end) => {
    const before = (await jobs(house, firmId)) ?? 0;
    const refusals: string[] = [];
    let sent = 0;
    let on = true;
    // eight people at two servers, one act after the other
    const people = Array.from({ length: 8 }, async (_, i) => {
      while (on) {
        sent += 1;
        await acknowledged(urls[i % 2] ?? '', refusals);
      }
    });
    await new Promise((done) => setTimeout(done, 800));
    await end();
    await new Promise((done) => setTimeout(done, 700));
    await server.start();
    await until(async () => (await fetch(`${urls[0]}/api/health/ready`)).ok && (await fetch(`${urls[1]}/api/health/ready`)).ok, 'both servers to be ready again', LONG);
    on = false;
    await Promise.all(people);
    expect(refusals.length).toBeGreaterThan(0);
    expect((await jobs(house, firmId)) ?? 0).toBe(before + sent);
    // the worker is back as well, and takes the lock again by which others know that it lives
    const job = await createJob(principal, firmId);
    const guest = `${randomUUID()}@people.example`;
    made(await principal.post(`/jobs/${job.id}/invitations`, { id: v7(), email: guest, name: 'Pat Rowe', role: 'homeowner' }));
    await house.mail.wait(guest, /invites you/, LONG);
    await until(async () => (await house.sql<{ n: number }>(`select count(*)::int as n from pg_locks where locktype = 'advisory' and granted`))[0]?.n === 1, "the worker's lock", LONG);
    const check = await operate(house, 'check');
    expect([check.status, check.output.includes('BROKEN')]).toEqual([0, false]);
  });
});

describe('a connection to the database that falls silent', () => {
  let house: House;
  beforeAll(async () => {
    house = await House.open({ LOG_LEVEL: 'silent' });
    await house.worker();
  });
  afterAll(() => house.close());

  /** One act over a connection that falls silent at the last of these words, and the same act again once the connection works. */
  async function silenced(words: readonly string[], when: 'before' | 'after') {
    const { proxy, url: database } = await StallingProxy.before(house.env['DATABASE_WRITE_URL'] ?? '');
    try {
      const { url } = await house.web({ env: { DATABASE_WRITE_URL: database } });
      const { principal, firmId } = await principalWithFirm(house, url);
      const [input, key] = [jobInput(firmId), randomUUID()];
      proxy.stallAt([key, ...words], when);
      const began = Date.now();
      const first = await principal.post('/jobs', input, key);
      const seconds = (Date.now() - began) / 1_000;
      const kept = await jobs(house, firmId);
      proxy.recover();
      const again = await principal.post('/jobs', input, key);
      const { code } = first.body as { code: string };
      return { first: [first.status, code], stalled: seconds > 8 && seconds < 16, kept, again: [again.status, again.headers['idempotency-replayed']], jobs: await jobs(house, firmId) };
    } finally {
      await proxy.close();
    }
  }

  it('keeps nobody waiting for long, and the act is done once when it is sent again', async () => {
    // side by side, since each waits until patience ends
    const [early, late, answered] = await Promise.all([silenced([], 'before'), silenced(['COMMIT'], 'before'), silenced(['COMMIT'], 'after')]);
    expect(early).toEqual({ first: [503, 'busy'], stalled: true, kept: 0, again: [201, undefined], jobs: 1 });
    expect(late).toEqual({ first: [503, 'unclear'], stalled: true, kept: 0, again: [201, undefined], jobs: 1 });
    expect(answered).toEqual({ first: [503, 'unclear'], stalled: true, kept: 1, again: [201, 'true'], jobs: 1 });
  });
});

describe('one connection for each pool', () => {
  it('is enough for everybody, one after the other', async () => {
    const house = await House.open({ DATABASE_POOL: '1' });
    try {
      await house.worker();
      const { url } = await house.web();
      const lent = await lentJob(house, url);
      const draw = await approvedDraw(lent);
      const { principal, firmId, ann, ben, lender, job } = lent;
      const reads = [ann, ben, lender, principal].flatMap((who) => [who.get(`/jobs/${job.id}`), who.get(drawAt(lent, draw.id)), who.get('/me')]);
      const writes = Array.from({ length: 8 }, () => principal.post('/jobs', jobInput(firmId)));
      const answers = await Promise.all([...reads, ...writes]);
      expect(answers.map(({ status }) => status)).toEqual([...reads.map(() => 200), ...writes.map(() => 201)]);
      expect(await ledgerState(house, job.id)).toMatchObject({ sum: 0 });
    } finally {
      await house.close();
    }
  });
});
