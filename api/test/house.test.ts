import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import type { House as HouseView } from '@tallypole/shared/schemas/house';
import { join } from './support/builders.ts';
import { issueChange, signChange, startChange } from './support/change-builders.ts';
import { approvedDraw, lentJob, made, prove, sentDraw } from './support/draw-builders.ts';
import { House } from './support/house.ts';
import type { Visitor } from './support/visitor.ts';

describe('the house: the pole and what waits', () => {
  let house: House;
  let url: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());

  const see = async (who: Visitor, jobId: string) => made<HouseView>(await who.get(`/jobs/${jobId}/house`));

  it('shows each milestone as it is proven, billed and paid, in building order', async () => {
    const lent = await lentJob(house, url);
    const before = await see(lent.ann, lent.job.id);
    expect(before.pole.milestones.every(({ provenCents, billedCents, paidCents }) => provenCents + billedCents + paidCents === 0)).toBe(true);
    const draw = await approvedDraw(lent);
    const after = await see(lent.ann, lent.job.id);
    const foundation = after.pole.milestones.find(({ name }) => name === 'Foundation');
    expect(foundation?.provenCents).toBe(foundation?.scheduledCents);
    expect(foundation?.billedCents).toBe(foundation?.scheduledCents);
    // nothing was paid on it yet but what the deposit covers
    expect(after.pole.milestones.reduce((a, m) => a + m.paidCents, after.pole.general.paidCents)).toBe(draw.summary.depositUsedNowCents);
    const total = after.pole.milestones.reduce((a, m) => a + m.scheduledCents, after.pole.general.scheduledCents);
    expect(total).toBe(lent.job.contractSumTodayCents);
  });

  it('names who is waited for, and tells each person what is theirs', async () => {
    const lent = await lentJob(house, url);
    await prove(lent, 'Foundation');
    const draw = await sentDraw(lent);
    const ann = await see(lent.ann, lent.job.id);
    expect(ann.waits).toEqual([expect.objectContaining({ kind: 'draw_to_approve', id: draw.id, mine: true })]);
    const firm = await see(lent.principal, lent.job.id);
    expect(firm.waits).toEqual([expect.objectContaining({ kind: 'draw_to_approve', mine: false })]);
    expect(firm.waits[0]?.waitsFor.length).toBe(2);
  });

  it('marks a change on its band from the day it is sent out, and asks those who have not signed', async () => {
    const lent = await lentJob(house, url);
    const seen = await issueChange(lent, await startChange(lent));
    const framing = async () => (await see(lent.ann, lent.job.id)).pole.milestones.find(({ name }) => name === 'Framing');
    expect((await framing())?.changes).toEqual([expect.objectContaining({ id: seen.id, pending: true })]);
    const before = (await framing())?.scheduledCents ?? 0;
    await signChange(lent, lent.ann, seen);
    expect((await see(lent.ann, lent.job.id)).waits).toEqual([expect.objectContaining({ kind: 'change_to_decide', mine: false, cents: 95_137, waitsFor: ['Ben Moss'] })]);
    await signChange(lent, lent.ben, seen, 'Ben Moss');
    expect(await framing()).toMatchObject({ scheduledCents: before + 95_137, changes: [{ pending: false }] });
  });

  it('shows an inspector how high the house stands, and no price', async () => {
    const lent = await lentJob(house, url);
    const inspector = await join(lent.principal, lent.job.id, 'inspector');
    const { pole } = await see(inspector, lent.job.id);
    expect(pole.prices).toBe(false);
    expect(pole.milestones.reduce((a, m) => a + m.scheduledCents, pole.general.scheduledCents)).toBeLessThanOrEqual(10_003);
  });
});
