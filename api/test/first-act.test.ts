import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import type { JobList } from '@tallypole/shared/schemas/jobs';
import { createJob, join, jobInput, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

describe('from signing up to a homeowner who sees the job', () => {
  let house: House;
  let url: string;
  let second: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    ({ url: second } = await house.web());
  });
  afterAll(() => house.close());

  it('lets the principal sign up, create a job and invite; the homeowner sees it; strangers get 404', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const homeowner = await join(principal, job.id, 'homeowner');
    const lender = await join(principal, job.id, 'lender');

    const seen = await homeowner.get(`/jobs/${job.id}`);
    expect(seen.status).toBe(200);
    expect(seen.body).toMatchObject({ name: '9 Larkspur Court', contractSumTodayCents: 40_000_000, roles: ['homeowner'] });
    expect((await lender.get(`/jobs/${job.id}`)).body).toMatchObject({ roles: ['lender'] });

    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(`/jobs/${job.id}`)).status).toBe(404);
    expect((await stranger.get(`/jobs/${job.id}/people`)).status).toBe(404);
    expect(((await stranger.get('/jobs')).body as JobList).items).toEqual([]);
    expect((await new Visitor(house, url, 'nobody@example.com').get(`/jobs/${job.id}`)).status).toBe(401);
  });

  it('mails an invitation that names job, firm and role, and tells the inviter who joined', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const homeowner = await join(principal, job.id, 'homeowner', 'Robin Vale');
    const mail = await house.mail.wait(homeowner.email, /invites you/);
    expect(mail.text).toContain('Robin Vale');
    expect(mail.text).toContain(`${url}/jobs/${job.id}`.replace(url, ''));
    expect(mail.html).toContain('as homeowner');
    const joined = await house.mail.wait(principal.email, /Robin Vale has joined/);
    expect(joined.text).toContain('as homeowner');
  });

  it('creates one job from twenty requests at once on two servers', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const input = jobInput(firmId);
    const key = randomUUID();
    const elsewhere = principal.at(second);
    const answers = await Promise.all(Array.from({ length: 20 }, (_, i) => (i % 2 ? principal : elsewhere).post('/jobs', input, key)));
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 20 }, () => 201));
    expect(answers.filter(({ headers }) => headers['idempotency-replayed'] === 'true')).toHaveLength(19);
    const rows = await house.sql<{ n: number }>('select count(*)::int as n from record_entry where job_id = $1', [input.id]);
    expect(rows).toEqual([{ n: 1 }]);
  });

  it('refuses the same key with other content, and a job without its key', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const key = randomUUID();
    await principal.post('/jobs', jobInput(firmId), key);
    const other = await principal.post('/jobs', jobInput(firmId), key);
    expect([other.status, (other.body as { code: string }).code]).toEqual([409, 'key_reused']);
    const without = await principal.post('/jobs', jobInput(firmId), null);
    expect((without.body as { code: string }).code).toBe('idempotency_key_missing');
  });

  it('names each wrong field', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const answer = await principal.post('/jobs', jobInput(firmId, { completeBy: '2026-09-01', depositCents: 40_000_001 }));
    expect(answer.status).toBe(400);
    const pointers = (answer.body as { errors: { pointer: string }[] }).errors.map(({ pointer }) => pointer);
    expect(pointers).toEqual(expect.arrayContaining(['/terms/completeBy']));
  });
});
