import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import type { Change, FirmPricing, PricingTermsInput } from '@tallypole/shared/schemas/changes';
import { join, principalWithFirm } from './support/builders.ts';
import { changeAt, changeDraft, startChange } from './support/change-builders.ts';
import { lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House } from './support/house.ts';

const shared = { laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'keep', flatFeeCents: 0, insuranceRate: 0 } as const;

describe('how a firm prices changes', () => {
  let house: House;
  let url: string;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    lent = await lentJob(house, url);
  });
  afterAll(() => house.close());

  const at = () => `/firms/${lent.firmId}/pricing`;
  const terms = async () => made<FirmPricing>(await lent.principal.get(at()));
  const set = async (next: object, version?: number) => await lent.principal.post(at(), { terms: next, version: version ?? (await terms()).version });
  const pointers = (answer: { body: unknown }) => (answer.body as { errors?: { pointer: string }[] }).errors?.map(({ pointer }) => pointer);

  it('holds for what is priced from then on; what was priced keeps its terms', async () => {
    const before = await startChange(lent);
    // net 786.25 (see the changes): ÷ (1 − 20 %) = 982.8125
    made(await set({ mode: 'margin', marginRate: 2_000, ...shared }));
    expect((await startChange(lent)).chargedCents).toBe(98_281);
    const after = made<Change>(await lent.principal.get(changeAt(lent, before.id)));
    expect([after.chargedCents, after.cost?.terms.mode]).toEqual([95_137, 'markup']);
    // 786.25 in tiers: 500.00 at 10 % and 286.25 at 5 % = 50.00 + 14.31; profit 10 % of 850.56 = 85.06
    made(await set({ mode: 'tiers', overhead: [{ upToCents: 50_000, rate: 1_000 }, { upToCents: null, rate: 500 }], profit: [{ upToCents: null, rate: 1_000 }], ...shared }));
    expect((await startChange(lent)).chargedCents).toBe(78_625 + 5_000 + 1_431 + 8_506);
  });

  it('is edited by one at a time and refused where nothing could be priced by it', async () => {
    const { version, terms: now } = await terms();
    made(await set(now, version));
    expect((await set(now, version)).body).toMatchObject({ code: 'stale' });
    expect(pointers(await set({ mode: 'margin', marginRate: 10_000, ...shared }))).toEqual(['/terms/marginRate']);
    const falling: PricingTermsInput = { mode: 'tiers', overhead: [{ upToCents: 500, rate: 1 }, { upToCents: 400, rate: 1 }, { upToCents: null, rate: 1 }], profit: [{ upToCents: null, rate: 1 }], ...shared };
    expect(pointers(await set(falling))).toEqual(['/terms/overhead/1/upToCents']);
    expect(pointers(await set({ ...now, mode: 'other' }))).toEqual(['/terms/mode']);
  });

  it('may differ for one change, with the reason', async () => {
    const own = { mode: 'margin', marginRate: 0, ...shared } as const;
    const silent = await lent.principal.post(`/jobs/${lent.job.id}/changes`, changeDraft(lent, { terms: own }));
    expect(pointers(silent)).toEqual(['/termsReason']);
    const change = await startChange(lent, { terms: own, termsReason: 'Our own mistake: at cost.' });
    expect([change.chargedCents, change.cost?.ownTerms, change.cost?.termsReason]).toEqual([78_625, true, 'Our own mistake: at cost.']);
  });

  it('is for those who price in the firm, and for nobody else', async () => {
    const { principal: stranger } = await principalWithFirm(house, url);
    for (const who of [stranger, lent.ann, lent.lender]) expect((await who.get(at())).status).toBe(404);
    const designer = await join(lent.principal, lent.job.id, 'designer');
    expect((await designer.post(at(), { terms: (await terms()).terms, version: 1 })).status).toBe(404);
  });
});
