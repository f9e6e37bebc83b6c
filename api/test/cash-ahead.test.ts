import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import type { JobCashAhead, JobMoney } from '@tallypole/shared/schemas/money';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { issueChange, startChange } from './support/change-builders.ts';
import { approvedDraw, lentJob, made } from './support/draw-builders.ts';
import { House } from './support/house.ts';
import type { Visitor } from './support/visitor.ts';

describe('cash ahead', () => {
  let house: House;
  let url: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());

  const ahead = async (who: Visitor, jobId: string) => made<JobCashAhead>(await who.get(`/jobs/${jobId}/money/ahead`)).ahead;
  const money = async (who: Visitor, jobId: string) => made<JobMoney>(await who.get(`/jobs/${jobId}/money`));

  it('adds up to what is left to bill, open, and not covered by the deposit, before the first draw and after it, the same for everybody', async () => {
    const lent = await lentJob(house, url);
    const empty = await ahead(lent.ann, lent.job.id);
    // nothing is received yet: all of the contract sum is ahead
    expect(empty).toMatchObject({ totalCents: 40_000_000, leftToBillCents: 40_000_000, approvedUnpaidCents: 0, depositLeftCents: 0 });
    await approvedDraw(lent);
    const seen = await ahead(lent.ann, lent.job.id);
    const figures = await money(lent.ann, lent.job.id);
    expect(seen?.totalCents).toBe(figures.leftToBill.cents + figures.open.cents - figures.depositLeft.cents);
    expect(seen?.months.reduce((sum, { totalCents }) => sum + totalCents, 0)).toBe(seen?.totalCents);
    expect(seen?.months.reduce((sum, { loanCents }) => sum + loanCents, 0)).toBeLessThanOrEqual(30_000_000);
    for (const { homeownerCents, loanCents, notFundedCents, totalCents } of seen?.months ?? []) expect(homeownerCents + loanCents + notFundedCents).toBe(totalCents);
    for (const who of [lent.principal, lent.lender]) expect(await ahead(who, lent.job.id)).toEqual(seen);
    expect(figures.open.cents).toBe(seen?.approvedUnpaidCents);
  });

  it('shows a change that is out as a band, in no other figure', async () => {
    const lent = await lentJob(house, url);
    const before = await ahead(lent.ann, lent.job.id);
    await issueChange(lent, await startChange(lent));
    const after = await ahead(lent.ann, lent.job.id);
    expect(after).toMatchObject({ totalCents: before?.totalCents, issuedCents: 95_137 });
    expect(after?.months.map(({ totalCents }) => totalCents)).toEqual(before?.months.map(({ totalCents }) => totalCents));
    expect(after?.months.at(-1)?.runningWithIssuedCents).toBe((before?.totalCents ?? 0) + 95_137);
  });

  it('says nothing before there is a schedule, and nothing to the site or a stranger', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    expect(await ahead(principal, job.id)).toBeNull();
    const inspector = await join(principal, job.id, 'inspector');
    expect((await inspector.get(`/jobs/${job.id}/money/ahead`)).status).toBe(403);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(`/jobs/${job.id}/money/ahead`)).status).toBe(404);
  });
});
