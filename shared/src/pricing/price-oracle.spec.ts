import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { billCostPlus, byTiers, ownersView, priceChange, settleAllowance, type MarkupTerms, type PriceLine, type PricingTerms, type Tier } from './index.ts';

const Exact = Decimal.clone({ precision: 80 });
const cent = (value: Decimal) => value.toDecimalPlaces(2, Decimal.ROUND_HALF_UP);
const of = (basisPoints: number, base: Decimal) => cent(base.times(basisPoints).div(10_000));
const dollars = (cents: number) => new Exact(cents).div(100);
// −0 becomes 0
const cents = (value: Decimal) => value.times(100).toNumber() + 0;

const classes = ['labor', 'material', 'equipment', 'subcontract', 'fee'] as const;
const decimal = (max: number) => fc.integer({ min: 0, max }).map((n) => new Decimal(n).div(10_000).toFixed());
const lines: fc.Arbitrary<PriceLine[]> = fc
  .array(fc.record({ class: fc.constantFrom(...classes), effect: fc.constantFrom('add' as const, 'deduct' as const), quantity: decimal(5_000_000), unitCost: decimal(50_000_000), taxable: fc.boolean() }), { maxLength: 20 })
  .map((all) => all.map((line, i) => ({ ...line, id: String(i), description: `Line ${i}`, unit: 'ea' })));
const rate = (max: number) => fc.integer({ min: 0, max });
const tiers: fc.Arbitrary<Tier[]> = fc
  .tuple(fc.uniqueArray(fc.integer({ min: 1, max: 50_000_000 }), { maxLength: 4 }), fc.array(rate(10_000), { minLength: 5, maxLength: 5 }))
  .map(([bounds, rates]) => [...bounds.sort((a, b) => a - b), null].map((upToCents, i) => ({ upToCents, rate: rates[i] ?? 0 })));
const group = fc.record({ overheadRate: rate(4000), profitRate: rate(4000) });
const mode: fc.Arbitrary<MarkupTerms> = fc.oneof(
  fc.record({ mode: fc.constant('markup' as const), own: group, subcontract: group, profitOn: fc.constantFrom('cost' as const, 'cost_and_overhead' as const) }),
  fc.record({ mode: fc.constant('margin' as const), marginRate: rate(9_999) }),
  fc.record({ mode: fc.constant('tiers' as const), overhead: tiers, profit: tiers }),
);
const terms: fc.Arbitrary<PricingTerms> = fc
  .tuple(mode, fc.record({ laborBurdenRate: rate(30_000), tax: fc.record({ on: fc.constantFrom('materials' as const, 'price' as const), rate: rate(1200) }), deducts: fc.constantFrom('keep' as const, 'give_back' as const), flatFeeCents: fc.integer({ min: 0, max: 50_000 }), insuranceRate: rate(500) }))
  .map(([how, rest]) => ({ ...how, ...rest }));

/** A charge by marginal tiers, each tier's part rounded; the mirror image below zero. */
function tiered(base: Decimal, all: readonly Tier[]): Decimal {
  let below = new Exact(0);
  let charge = new Exact(0);
  for (const { upToCents, rate: basisPoints } of all) {
    const bound = upToCents === null ? base.abs() : Decimal.min(base.abs(), dollars(upToCents));
    charge = charge.plus(of(basisPoints, Decimal.max(0, bound.minus(below))));
    below = Decimal.max(below, bound);
  }
  return base.lt(0) ? charge.neg() : charge;
}

/** The price once more, in dollars and from the words of the design alone. */
function priceByDecimals(given: readonly PriceLine[], t: PricingTerms): Decimal {
  const amount = (line: PriceLine) => cent(new Exact(line.quantity).times(line.unitCost)).times(line.effect === 'add' ? 1 : -1);
  const net = (keep: (line: PriceLine) => boolean) => given.filter(keep).reduce((a, line) => a.plus(amount(line)), new Exact(0));
  const labor = net((line) => line.class === 'labor');
  const tax = t.tax.on === 'materials' ? of(t.tax.rate, net((line) => line.taxable)) : new Exact(0);
  const own = net((line) => ['labor', 'material', 'equipment'].includes(line.class)).plus(of(t.laborBurdenRate, labor)).plus(tax);
  const subcontract = net((line) => line.class === 'subcontract');
  const cost = own.plus(subcontract);
  let markup = new Exact(0);
  if (t.mode === 'markup') {
    for (const [base, rates] of [[own, t.own], [subcontract, t.subcontract]] as const) {
      const overhead = of(rates.overheadRate, base);
      markup = markup.plus(overhead).plus(of(rates.profitRate, t.profitOn === 'cost' ? base : base.plus(overhead)));
    }
  } else if (t.mode === 'margin') markup = cent(cost.div(new Exact(10_000 - t.marginRate).div(10_000))).minus(cost);
  else {
    const overhead = tiered(cost, t.overhead);
    markup = overhead.plus(tiered(cost.plus(overhead), t.profit));
  }
  if (t.deducts === 'keep') markup = Decimal.max(0, markup);
  const sum = cost.plus(markup).plus(net((line) => line.class === 'fee')).plus(dollars(t.flatFeeCents));
  const insured = sum.plus(of(t.insuranceRate, sum));
  return insured.plus(t.tax.on === 'price' ? of(t.tax.rate, insured) : 0);
}

describe('a price against an independent decimal library', () => {
  it('is the same in all three modes of mark-up, in any order of its lines', () => {
    fc.assert(
      fc.property(lines, terms, fc.nat(), (given, t, turn) => {
        const expected = cents(priceByDecimals(given, t));
        const at = given.length === 0 ? 0 : turn % given.length;
        const { steps: _steps, lines: _lines, ...price } = priceChange({ lines: given, terms: t });
        expect(price.priceCents).toBe(expected);
        expect(priceChange({ lines: [...given.slice(at), ...given.slice(0, at)], terms: t }, { steps: false })).toMatchObject(price);
      }),
      { numRuns: 500 },
    );
  });

  it('turns round with its lines where deducts are given back', () => {
    fc.assert(
      fc.property(lines, terms, (given, t) => {
        const back = { ...t, deducts: 'give_back' as const, flatFeeCents: 0 };
        const turned = given.map((line) => ({ ...line, effect: line.effect === 'add' ? ('deduct' as const) : ('add' as const) }));
        expect(priceChange({ lines: turned, terms: back }).priceCents).toBe(0 - priceChange({ lines: given, terms: back }).priceCents);
      }),
    );
  });

  it('shows the homeowner the same parts whatever the order of lines, but for who carries a left-over cent', () => {
    fc.assert(
      fc.property(lines, terms, (given, t) => {
        const seen = (order: PriceLine[]) => new Map(ownersView(order, priceChange({ lines: order, terms: t }), 'itemized', 'Change').map((line) => [line.description, line.cents]));
        const there = seen(given);
        for (const [name, amount] of seen([...given].reverse())) expect(Math.abs(amount - (there.get(name) ?? NaN))).toBeLessThanOrEqual(1);
      }),
    );
  });

  it('charges by tiers, settles allowances and bills cost-plus alike', () => {
    const any = fc.integer({ min: -90_000_000, max: 90_000_000 });
    const sum = fc.integer({ min: 0, max: 90_000_000 });
    fc.assert(
      fc.property(any, tiers, sum, sum, sum, rate(10_000), fc.boolean(), (base, all, a, b, c, r, complete) => {
        expect(byTiers(base, all)).toBe(cents(tiered(dollars(base), all)));
        const difference = dollars(b).minus(dollars(a));
        expect(settleAllowance({ allowanceCents: a, selectedCostCents: b, markupRate: r }).priceCents).toBe(cents(difference.plus(of(r, Decimal.max(0, difference)))));
        const spent = dollars(a).plus(dollars(b));
        const saved = complete ? Decimal.max(0, dollars(c).minus(spent)) : new Exact(0);
        expect(billCostPlus({ costToDateCents: a, feeToDateCents: b, ceilingCents: c, savingsShareRate: r, complete }).billedCents).toBe(cents(Decimal.min(spent, dollars(c)).plus(of(r, saved))));
      }),
    );
  });
});
