import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { ownersView, priceChange, settleAllowance, byTiers, billCostPlus, type PriceLine, type PricingTerms, type Tier } from './index.ts';

const plain: PricingTerms = {
  mode: 'markup',
  own: { overheadRate: 0, profitRate: 0 },
  subcontract: { overheadRate: 0, profitRate: 0 },
  profitOn: 'cost',
  laborBurdenRate: 0,
  tax: { on: 'materials', rate: 0 },
  deducts: 'keep',
  flatFeeCents: 0,
  insuranceRate: 0,
};
let n = 0;
const line = (given: Partial<PriceLine>): PriceLine => ({ id: String((n += 1)), description: 'Line', class: 'material', effect: 'add', quantity: '1', unit: 'ea', unitCost: '0', taxable: false, ...given });
const cost = (dollars: string, given: Partial<PriceLine> = {}) => line({ unitCost: dollars, ...given });

const anyLine = fc.record({
  class: fc.constantFrom('labor', 'material', 'equipment', 'subcontract', 'fee') as fc.Arbitrary<PriceLine['class']>,
  effect: fc.constantFrom('add', 'deduct') as fc.Arbitrary<PriceLine['effect']>,
  quantity: fc.integer({ min: 0, max: 5_000_000 }).map((q) => new Decimal(q).div(10_000).toFixed()),
  unitCost: fc.integer({ min: 0, max: 50_000_000 }).map((c) => new Decimal(c).div(10_000).toFixed()),
  taxable: fc.boolean(),
}).map((given) => line(given));
const lines = fc.array(anyLine, { maxLength: 30 });
const rates = fc.record({ overheadRate: fc.integer({ min: 0, max: 4000 }), profitRate: fc.integer({ min: 0, max: 4000 }) });
const anyTerms: fc.Arbitrary<PricingTerms> = fc
  .tuple(
    fc.oneof(
      fc.record({ mode: fc.constant('markup' as const), own: rates, subcontract: rates, profitOn: fc.constantFrom('cost' as const, 'cost_and_overhead' as const) }),
      fc.record({ mode: fc.constant('margin' as const), marginRate: fc.integer({ min: 0, max: 6000 }) }),
    ),
    fc.record({
      laborBurdenRate: fc.integer({ min: 0, max: 5000 }),
      tax: fc.record({ on: fc.constantFrom('materials' as const, 'price' as const), rate: fc.integer({ min: 0, max: 1200 }) }),
      deducts: fc.constantFrom('keep' as const, 'give_back' as const),
      flatFeeCents: fc.integer({ min: 0, max: 50_000 }),
      insuranceRate: fc.integer({ min: 0, max: 500 }),
    }),
  )
  .map(([mode, rest]) => ({ ...mode, ...rest }));

describe('the price of a change', () => {
  it('prints parts that add up to the price', () => {
    fc.assert(
      fc.property(lines, anyTerms, (given, terms) => {
        const p = priceChange({ lines: given, terms });
        expect(p.ownCostCents + p.subcontractCostCents).toBe(p.netCostCents);
        expect(p.netCostCents + p.markupCents + p.feesCents + p.flatFeeCents).toBe(p.sumCents);
        expect(p.sumCents + p.insuranceCents + p.priceTaxCents).toBe(p.priceCents);
        if (terms.deducts === 'keep') expect(p.markupCents).toBeGreaterThanOrEqual(0);
        expect(p.steps?.result).toEqual({ kind: 'money', cents: p.priceCents });
      }),
    );
  });

  it('does not depend on the order of lines', () => {
    fc.assert(
      fc.property(lines, anyTerms, (given, terms) => {
        const { priceCents, markupCents, materialsTaxCents } = priceChange({ lines: given, terms });
        expect(priceChange({ lines: [...given].reverse(), terms })).toMatchObject({ priceCents, markupCents, materialsTaxCents });
      }),
    );
  });

  it('agrees with an independent decimal library', () => {
    const cent = (value: Decimal) => value.toDecimalPlaces(2, Decimal.ROUND_HALF_UP);
    const of = (basisPoints: number, base: Decimal) => cent(base.times(basisPoints).div(10_000));
    fc.assert(
      fc.property(lines, anyTerms.filter((terms) => terms.mode === 'markup'), (given, terms) => {
        if (terms.mode !== 'markup') return;
        const amount = (l: PriceLine) => cent(new Decimal(l.quantity).times(l.unitCost)).times(l.effect === 'add' ? 1 : -1);
        const net = (...classes: string[]) => given.filter((l) => classes.includes(l.class)).reduce((a, l) => a.plus(amount(l)), new Decimal(0));
        const tax = terms.tax.on === 'materials' ? of(terms.tax.rate, given.filter((l) => l.taxable).reduce((a, l) => a.plus(amount(l)), new Decimal(0))) : new Decimal(0);
        const own = net('labor', 'material', 'equipment').plus(of(terms.laborBurdenRate, net('labor'))).plus(tax);
        const group = (base: Decimal, r: { overheadRate: number; profitRate: number }) => {
          const overhead = of(r.overheadRate, base);
          return overhead.plus(of(r.profitRate, terms.profitOn === 'cost' ? base : base.plus(overhead)));
        };
        let markup = group(own, terms.own).plus(group(net('subcontract'), terms.subcontract));
        if (terms.deducts === 'keep' && markup.lt(0)) markup = new Decimal(0);
        const sum = own.plus(net('subcontract')).plus(markup).plus(net('fee')).plus(new Decimal(terms.flatFeeCents).div(100));
        const insured = sum.plus(of(terms.insuranceRate, sum));
        const price = insured.plus(terms.tax.on === 'price' ? of(terms.tax.rate, insured) : 0);
        expect(priceChange({ lines: given, terms }).priceCents).toBe(price.times(100).toNumber());
      }),
    );
  });

  it('charges nothing for a no-charge change and keeps its cost', () => {
    expect(priceChange({ lines: [cost('100')], terms: plain, noCharge: true })).toMatchObject({ priceCents: 10_000, chargedCents: 0 });
  });

  // Marion County OR, Courthouse Square change pricing letter (doc 3663993 p. 19): labor +15 %, equipment +10 %, materials +10 %,
  // a supplement of 5 % on sub work; deducts by the same percents. The letter's classes are priced one at a time.
  it('reproduces a county letter\'s mark-ups, as a deduct too', () => {
    const at = (rate: number, dollars: string, effect: 'add' | 'deduct') =>
      priceChange({ lines: [cost(dollars, { effect })], terms: { ...plain, deducts: 'give_back', own: { overheadRate: rate, profitRate: 0 } } }).priceCents;
    const sub = (effect: 'add' | 'deduct') =>
      priceChange({ lines: [cost('1800', { class: 'subcontract', effect })], terms: { ...plain, deducts: 'give_back', subcontract: { overheadRate: 500, profitRate: 0 } } }).priceCents;
    for (const [effect, total] of [['add', 846_700], ['deduct', -846_700]] as const) {
      expect(at(1500, '2400', effect) + at(1000, '350', effect) + at(1000, '3120', effect) + sub(effect)).toBe(total);
    }
  });

  // GSAR 552.243-71(h)(1)-(9) (Mar 2019), own figures by the published rule: no mark-up on mark-up, bond last.
  it('marks up own work and puts the bond last as the federal clause has it', () => {
    const p = priceChange({ lines: [cost('10000')], terms: { ...plain, own: { overheadRate: 1200, profitRate: 1000 }, profitOn: 'cost_and_overhead' } });
    expect([p.overheadCents, p.profitCents]).toEqual([120_000, 112_000]);
    const whole = priceChange({ lines: [cost('20510')], terms: { ...plain, insuranceRate: 120 } });
    expect([whole.insuranceCents, whole.priceCents]).toEqual([24_612, 2_075_612]);
  });

  // VAAR 852.243-70(b)(1) (SEP 2019): 10 % to 20,000, 7.5 % on the next 30,000, 5 % above; reading A, where the tiers of the profit
  // are applied to cost and overhead together.
  it.each([
    [8_000, 80_000, 88_000, 968_000],
    [20_000, 200_000, 215_000, 2_415_000],
    [35_000, 312_500, 335_938, 4_148_438],
    [50_000, 425_000, 446_250, 5_871_250],
    [60_000, 475_000, 498_750, 6_973_750],
    [125_000, 800_000, 840_000, 14_140_000],
  ])('follows the sliding scale for a direct cost of %i', (direct, overhead, profit, total) => {
    const tiers: Tier[] = [{ upToCents: 2_000_000, rate: 1000 }, { upToCents: 5_000_000, rate: 750 }, { upToCents: null, rate: 500 }];
    const { mode: _mode, ...rest } = plain;
    const terms = { ...rest, mode: 'tiers' as const, overhead: tiers, profit: tiers };
    const p = priceChange({ lines: [cost(String(direct))], terms });
    expect([p.overheadCents, p.profitCents, p.priceCents]).toEqual([overhead, profit, total]);
    const back = priceChange({ lines: [cost(String(direct), { effect: 'deduct' })], terms: { ...terms, deducts: 'give_back' } });
    expect(back.priceCents).toBe(-total);
  });

  it('adds a margin as a share of the price: 10,000.00 at 20 % is 12,500.00', () => {
    const { own: _o, subcontract: _s, profitOn: _p, ...rest } = plain as Extract<PricingTerms, { mode: 'markup' }>;
    expect(priceChange({ lines: [cost('10000')], terms: { ...rest, mode: 'margin', marginRate: 2000 } }).priceCents).toBe(1_250_000);
  });

  it('taxes taxable lines once, or the whole price, as the state has it', () => {
    const given = [cost('0.55', { taxable: true }), cost('0.55', { taxable: true }), cost('10')];
    expect(priceChange({ lines: given, terms: { ...plain, tax: { on: 'materials', rate: 700 } } }).materialsTaxCents).toBe(8);
    expect(priceChange({ lines: given, terms: { ...plain, tax: { on: 'price', rate: 700 } } }).priceTaxCents).toBe(78);
  });
});

describe('what the homeowner sees of a price', () => {
  it('always adds up to what is charged, and shows no mark-up', () => {
    fc.assert(
      fc.property(lines, anyTerms, fc.constantFrom('itemized' as const, 'grouped' as const, 'one_sum' as const), (given, terms, presentation) => {
        const priced = priceChange({ lines: given, terms });
        const seen = ownersView(given, priced, presentation, 'The change');
        expect(seen.reduce((a, l) => a + l.cents, 0)).toBe(priced.chargedCents);
      }),
    );
  });
});

describe('allowances and cost-plus', () => {
  it('marks up an excess only', () => {
    expect(settleAllowance({ allowanceCents: 1_200_000, selectedCostCents: 1_385_000, markupRate: 1000 })).toMatchObject({ differenceCents: 185_000, markupCents: 18_500, priceCents: 203_500 });
    expect(settleAllowance({ allowanceCents: 1_200_000, selectedCostCents: 1_100_000, markupRate: 1000 })).toMatchObject({ priceCents: -100_000, markupCents: 0 });
  });
  it('bills cost and fee up to the ceiling and shares what is saved', () => {
    const base = { feeToDateCents: 10_000, ceilingCents: 100_000, savingsShareRate: 5000 };
    expect(billCostPlus({ ...base, costToDateCents: 95_000, complete: true }).billedCents).toBe(100_000);
    expect(billCostPlus({ ...base, costToDateCents: 70_000, complete: false })).toMatchObject({ billedCents: 80_000, savingsCents: 0 });
    expect(billCostPlus({ ...base, costToDateCents: 70_000, complete: true })).toMatchObject({ billedCents: 90_000, savingsCents: 20_000 });
  });
});

describe('bad input to a price', () => {
  const with_ = (terms: Partial<PricingTerms>, given: PriceLine[] = [cost('1')]) => () => priceChange({ lines: given, terms: { ...plain, ...terms } as PricingTerms });
  const twice = cost('1');
  const fails: [string, () => unknown, string][] = [
    ['a float quantity', with_({}, [cost('1', { quantity: '1.00001' })]), 'lines.0.quantity'],
    ['an empty quantity', with_({}, [cost('1', { quantity: '' })]), 'lines.0.quantity'],
    ['a negative quantity', with_({}, [cost('1', { quantity: '-1' })]), 'lines.0.quantity'],
    ['words as a cost', with_({}, [cost('ten')]), 'lines.0.unitCost'],
    ['a negative cost', with_({}, [cost('-1')]), 'lines.0.unitCost'],
    ['an exponent', with_({}, [cost('1e3')]), 'lines.0.unitCost'],
    ['too many digits', with_({}, [cost('1234567890123')]), 'lines.0.unitCost'],
    ['an overflow', with_({}, [cost('999999999999', { quantity: '999999999999' })]), 'lines.0'],
    ['an unknown class', with_({}, [cost('1', { class: 'profit' as never })]), 'lines.0.class'],
    ['an unknown effect', with_({}, [cost('1', { effect: 'take' as never })]), 'lines.0.effect'],
    ['the same line twice', with_({}, [twice, twice]), 'lines.1.id'],
    ['a negative rate', with_({ own: { overheadRate: -1, profitRate: 0 } } as Partial<PricingTerms>), 'terms.own.overheadRate'],
    ['a rate over 100 %', with_({ own: { overheadRate: 0, profitRate: 10_001 } } as Partial<PricingTerms>), 'terms.own.profitRate'],
    ['a fraction of a basis point', with_({ insuranceRate: 0.5 }), 'terms.insuranceRate'],
    ['a tax over 100 %', with_({ tax: { on: 'materials', rate: 10_001 } }), 'terms.tax.rate'],
    ['a negative fee', with_({ flatFeeCents: -1 }), 'terms.flatFeeCents'],
    ['half a cent', with_({ flatFeeCents: 0.5 }), 'terms.flatFeeCents'],
    ['a margin of 100 %', with_({ mode: 'margin', marginRate: 10_000 } as Partial<PricingTerms>), 'terms.marginRate'],
    ['no tiers', () => byTiers(1, []), 'tiers'],
    ['a last tier with a bound', () => byTiers(1, [{ upToCents: 5, rate: 1 }]), 'tiers.0.upToCents'],
    ['falling tiers', () => byTiers(1, [{ upToCents: 5, rate: 1 }, { upToCents: 5, rate: 1 }, { upToCents: null, rate: 1 }]), 'tiers.1.upToCents'],
    ['a negative allowance', () => settleAllowance({ allowanceCents: -1, selectedCostCents: 0, markupRate: 0 }), 'allowanceCents'],
    ['a negative selection', () => settleAllowance({ allowanceCents: 0, selectedCostCents: -1, markupRate: 0 }), 'selectedCostCents'],
    ['a negative ceiling', () => billCostPlus({ costToDateCents: 0, feeToDateCents: 0, ceilingCents: -1, savingsShareRate: 0, complete: false }), 'ceilingCents'],
  ];
  it.each(fails)('refuses %s and names the field', (_, run, field) => {
    expect(run).toThrow(InvalidInput);
    expect(run).toThrow(expect.objectContaining({ field }) as Error);
  });
});
