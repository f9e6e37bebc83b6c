import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { changeEffect, changeSteps, type ChangeSnapshot } from './index.ts';

const base: ChangeSnapshot = {
  job: { contractSumAsSignedCents: 48_650_000, changesApprovedCents: 0, completeBy: '2027-10-22', dayKind: 'working', daysApproved: 0, earnedToDateCents: 10_000_000, hasLoan: true, consentLimitCents: 500_000 },
  change: { number: 3, revision: '', title: 'Deeper joists', reason: 'Less bounce.', chargedCents: 391_240, days: 2, goodUntil: '2027-03-19', structural: true, milestoneName: 'Floor frame', lines: [{ description: 'Joists', effect: 'add', cents: 391_240 }], scope: [], photos: [], reviews: [] },
};
const change = (more: Partial<ChangeSnapshot['change']>, job: Partial<ChangeSnapshot['job']> = {}) => changeEffect({ job: { ...base.job, ...job }, change: { ...base.change, ...more } });

describe('the effect of a change', () => {
  it('moves contract sum, completion date and what is left to bill by exactly the change', () => {
    expect(changeEffect(base)).toMatchObject({
      before: { contractSumCents: 48_650_000, completionDate: '2027-10-22', leftToBillCents: 38_650_000 },
      after: { contractSumCents: 49_041_240, completionDate: '2027-10-26', leftToBillCents: 39_041_240 },
      funding: 'homeowner_until_lender_agrees',
      needsLendersWord: false,
    });
    fc.assert(
      fc.property(fc.integer({ min: -10_000_000, max: 10_000_000 }), fc.integer({ min: 0, max: 60 }), (chargedCents, days) => {
        const { before, after } = change({ chargedCents, days });
        expect(after.contractSumCents - before.contractSumCents).toBe(chargedCents);
        expect(after.leftToBillCents - before.leftToBillCents).toBe(chargedCents);
        expect(after.completionDate >= before.completionDate).toBe(true);
        expect(changeSteps({ ...base, change: { ...base.change, chargedCents, days } }).contractSum.result).toEqual({ kind: 'money', cents: after.contractSumCents });
      }),
    );
  });

  it('counts days as the contract does', () => {
    expect(change({ days: 3 }, { dayKind: 'calendar' }).after.completionDate).toBe('2027-10-25');
  });

  it('says who funds it, and when the lender must be asked', () => {
    expect(change({ chargedCents: 0 }).funding).toBe('nothing_to_pay');
    expect(change({ chargedCents: -5 }).funding).toBe('less_to_pay');
    expect(change({}, { hasLoan: false, consentLimitCents: null })).toMatchObject({ funding: 'homeowner', needsLendersWord: false });
    expect(change({ chargedCents: 500_001 }).needsLendersWord).toBe(true);
  });
});
