import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import path from 'node:path';
import { v7 } from 'uuid';
import { createJob, jobInput, principalWithFirm } from '../support/builders.ts';
import { House, until } from '../support/house.ts';
import type { Visitor } from '../support/visitor.ts';

const preload = path.join(import.meta.dirname, 'kill-at-commit.mjs');

describe('kill -9 around the first act', () => {
  let house: House;
  let url: string;
  let principal: Visitor;
  let firmId: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    ({ principal, firmId } = await principalWithFirm(house, url));
  });
  afterAll(() => house.close());

  const doomed = (operation: string, when: 'before' | 'after') => house.web({ preload, env: { KILL_OPERATION: operation, KILL_WHEN: when } });

  it.each(['before', 'after'] as const)('has one job when the server dies %s the commit and the browser sends it again', async (when) => {
    const dying = await doomed('job.create', when);
    const input = jobInput(firmId);
    const key = randomUUID();
    await expect(principal.at(dying.url).post('/jobs', input, key)).rejects.toThrow();
    const kept = await house.sql<{ n: number }>('select count(*)::int as n from job where id = $1', [input.id]);
    expect(kept).toEqual([{ n: when === 'before' ? 0 : 1 }]);

    const again = await principal.post('/jobs', input, key);
    expect([again.status, again.headers['idempotency-replayed']]).toEqual([201, when === 'before' ? undefined : 'true']);
    const entries = await house.sql<{ seq: number }>(`select seq::int from record_entry where job_id = $1 and chain = 'shared' order by seq`, [input.id]);
    expect(entries).toEqual([{ seq: 1 }]);
  });

  it.each(['before', 'after'] as const)('sends one invitation when the server dies %s the commit', async (when) => {
    const job = await createJob(principal, firmId);
    const dying = await doomed('person.invite', when);
    const input = { id: v7(), email: `kill-${when}@people.example`, name: 'Pat Rowe', role: 'homeowner' };
    const key = randomUUID();
    await expect(principal.at(dying.url).post(`/jobs/${job.id}/invitations`, input, key)).rejects.toThrow();
    expect((await principal.post(`/jobs/${job.id}/invitations`, input, key)).status).toBe(201);
    await house.mail.wait(input.email, /invites you/);
    await new Promise((done) => setTimeout(done, 500));
    expect(house.mail.to(input.email)).toHaveLength(1);
  });

  it('mails once the mail server takes mail again', async () => {
    const job = await createJob(principal, firmId);
    house.mail.refusing = true;
    const input = { id: v7(), email: 'later@people.example', name: 'Pat Rowe', role: 'homeowner' };
    expect((await principal.post(`/jobs/${job.id}/invitations`, input)).status).toBe(201);
    await new Promise((done) => setTimeout(done, 400));
    expect(house.mail.to(input.email)).toHaveLength(0);
    house.mail.refusing = false;
    await house.mail.wait(input.email, /invites you/, 30_000);
    expect(house.mail.to(input.email)).toHaveLength(1);
  });

  it('frees the jobs of a worker that was killed in the middle', async () => {
    const alone = await House.open();
    try {
      const first = await alone.worker();
      const { url: at } = await alone.web();
      const made = await principalWithFirm(alone, at);
      const job = await createJob(made.principal, made.firmId);
      await alone.kill(first);
      const input = { id: v7(), email: 'freed@people.example', name: 'Pat Rowe', role: 'homeowner' };
      expect((await made.principal.post(`/jobs/${job.id}/invitations`, input)).status).toBe(201);
      // as a worker leaves it that died while it held the job
      await alone.asQueueOwner(`update graphile_worker._private_jobs set locked_at = now() - interval '5 seconds', locked_by = 'worker_of_a_dead_pool'`);
      await alone.worker();
      await alone.mail.wait(input.email, /invites you/);
      await until(async () => (await alone.sql<{ n: number }>('select count(*)::int as n from notice where sent_at is null'))[0]?.n === 0, 'all notices to be marked');
    } finally {
      await alone.close();
    }
  });
});
