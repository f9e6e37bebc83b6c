import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeDraw, firstState, type DrawLine, type RetainageRelease, type RetainageTerms } from './index.ts';

const Exact = Decimal.clone({ precision: 60 });
const cent = (value: Decimal) => value.toDecimalPlaces(2, Decimal.ROUND_HALF_UP);
const dollars = (cents: number) => new Exact(cents).div(100);
const share = (basisPoints: number) => new Exact(basisPoints).div(10_000);
const sum = (values: Decimal[]) => values.reduce((a, b) => a.plus(b), new Exact(0));

interface Given {
  lines: DrawLine[];
  terms: RetainageTerms;
  contract: number;
  latched: number | null;
  release: RetainageRelease;
  reserveOver: boolean;
}

/** Retainage once more, in dollars and from the words of the design alone. */
function heldByDecimals({ lines, terms, contract, latched, release, reserveOver }: Given) {
  const billed = (items: DrawLine[]) => sum(items.map((line) => dollars(line.workCents).plus(dollars(line.onHandCents))));
  const subject = lines.filter((line) => !line.exempt);
  const S = billed(subject);
  let held = cent(sum(subject.map((line) => dollars(line.workCents).times(share(terms.workRate)).plus(dollars(line.onHandCents).times(share(terms.materialsRate))))));
  let T = latched === null ? null : dollars(latched);
  if (terms.step) {
    const threshold = cent(share(terms.step.thresholdRate).times(dollars(contract)));
    if (T === null && S.gte(threshold)) T = threshold;
    if (T !== null) {
      const lower = share(terms.step.rate);
      held = terms.step.on === 'all_work' ? cent(lower.times(S)) : cent(share(terms.workRate).times(Decimal.min(S, T)).plus(lower.times(Decimal.max(0, S.minus(T)))));
    }
  }
  const cap = terms.capRate === undefined ? null : cent(share(terms.capRate).times(dollars(contract)));
  if (cap && held.gt(cap)) held = cap;
  if (release.at === 'substantial_completion') held = 'keepRate' in release ? cent(share(release.keepRate).times(held)) : Decimal.min(held, cent(share(release.multipleRate).times(dollars(release.punchListCents))));
  if (release.at === 'final') held = new Exact(0);
  if (terms.reserveRate !== undefined && !reserveOver) {
    const floor = cent(share(terms.reserveRate).times(billed(lines)));
    held = Decimal.max(held, cap ? Decimal.min(floor, cap) : floor);
  }
  return { heldCents: Decimal.max(held, 0).times(100).toNumber(), latchedCents: terms.step && T ? T.times(100).toNumber() : null };
}

const lines = fc
  .array(fc.record({ scheduled: fc.integer({ min: 0, max: 90_000_000 }), work: fc.integer({ min: 0, max: 1000 }), onHand: fc.integer({ min: 0, max: 1000 }), exempt: fc.boolean() }), { minLength: 1, maxLength: 20 })
  .map((all) => all.map(({ scheduled, work, onHand, exempt }, i): DrawLine => {
    const workCents = Math.floor((scheduled * work) / 1000);
    return { id: String(i), description: String(i), scheduledCents: scheduled, workCents, onHandCents: Math.floor(((scheduled - workCents) * onHand) / 1000), approvedWorkCents: 0, approvedOnHandCents: 0, exempt };
  }));
const rate = (max: number) => fc.integer({ min: 0, max });
const terms: fc.Arbitrary<RetainageTerms> = fc.oneof(
  fc.record({ workRate: rate(10_000), materialsRate: rate(10_000), capRate: rate(1000), reserveRate: rate(1000) }, { requiredKeys: ['workRate', 'materialsRate'] }),
  fc.tuple(rate(2000), rate(10_000), rate(100), fc.constantFrom('further_work' as const, 'all_work' as const), fc.record({ capRate: rate(1000), reserveRate: rate(1000) }, { requiredKeys: [] })).map(([r, thresholdRate, part, on, more]) => ({ workRate: r, materialsRate: r, step: { thresholdRate, rate: Math.floor((r * part) / 100), on }, ...more })),
);
const release: fc.Arbitrary<RetainageRelease> = fc.oneof(
  fc.constant({ at: 'none' as const }),
  fc.constant({ at: 'final' as const }),
  fc.record({ at: fc.constant('substantial_completion' as const), punchListCents: fc.integer({ min: 0, max: 5_000_000 }), multipleRate: fc.integer({ min: 0, max: 50_000 }) }),
  fc.record({ at: fc.constant('substantial_completion' as const), keepRate: rate(10_000) }),
);

describe('a draw against an independent decimal library', () => {
  it('holds the same retainage, with steps, cap, release and reserve', () => {
    fc.assert(
      fc.property(lines, terms, release, fc.option(fc.integer({ min: 0, max: 50_000_000 })), fc.boolean(), (given, retainage, at, latched, reserveOver) => {
        const contract = given.reduce((a, line) => a + line.scheduledCents, 0);
        const { after } = computeDraw({ style: 'percent_complete', contractSumAsSignedCents: contract, changesApprovedCents: 0, lines: given, retainage, release: at, deposit: { depositCents: 0, use: 'first' }, withheldCents: 0, before: { ...firstState, latchedCents: retainage.step ? latched : null }, throughOn: '2027-03-15', isFinal: false, reserveOver });
        expect({ heldCents: after.retainageHeldCents, latchedCents: after.latchedCents }).toEqual(heldByDecimals({ lines: given, terms: retainage, contract, latched: retainage.step ? latched : null, release: at, reserveOver }));
      }),
      { numRuns: 500 },
    );
  });

  it('uses the same part of the deposit and comes to the same due', () => {
    fc.assert(
      fc.property(lines, fc.integer({ min: 0, max: 2_000_000 }), fc.integer({ min: 0, max: 100 }), fc.integer({ min: 0, max: 20_000_000 }), fc.constantFrom('proportional' as const, 'first' as const), fc.boolean(), (given, depositCents, usedShare, earnedCents, use, isFinal) => {
        const contract = given.reduce((a, line) => a + line.scheduledCents, 0);
        const depositUsedCents = Math.floor((depositCents * usedShare) / 100);
        const { summary } = computeDraw({ style: 'percent_complete', contractSumAsSignedCents: contract, changesApprovedCents: 0, lines: given, retainage: { workRate: 1000, materialsRate: 500 }, release: { at: 'none' }, deposit: { depositCents, use }, withheldCents: 0, before: { ...firstState, earnedCents, depositUsedCents }, throughOn: '2027-03-15', isFinal });
        const billed = sum(given.map((line) => dollars(line.workCents + line.onHandCents)));
        const held = dollars(heldByDecimals({ lines: given, terms: { workRate: 1000, materialsRate: 500 }, contract, latched: null, release: { at: 'none' }, reserveOver: false }).heldCents);
        const beforeDeposit = billed.minus(held).minus(dollars(earnedCents));
        const target = use === 'first' ? dollars(depositCents) : contract === 0 ? new Exact(0) : Decimal.min(dollars(depositCents), cent(dollars(depositCents).times(billed).div(dollars(contract))));
        const used = isFinal ? dollars(depositCents - depositUsedCents) : Decimal.max(0, Decimal.min(target.minus(dollars(depositUsedCents)), Decimal.max(0, beforeDeposit)));
        expect(summary.depositUsedNowCents).toBe(used.times(100).toNumber() + 0);
        expect(summary.dueNowCents - summary.creditCarriedCents).toBe(beforeDeposit.minus(used).times(100).toNumber() + 0);
      }),
      { numRuns: 300 },
    );
  });
});
