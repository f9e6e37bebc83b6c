import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput, type Step } from '../arithmetic/index.ts';
import { addCalendarDays } from '../due/index.ts';
import { waiverExposure, type Trade, type TradeInvoice, type Waiver } from './index.ts';

const trade = (more: Partial<Trade> = {}): Trade => ({ id: 't', name: 'Masonry', committedCents: 5_000_000, retainageHeldCents: 0, invoices: [], payments: [], waivers: [], ...more });
const invoice = (throughOn: string, amountCents: number): TradeInvoice => ({ id: `${throughOn} ${amountCents}`, throughOn, amountCents });
const progress = (throughOn: string, amountCents: number, effect: Waiver['effect'] = 'unconditional'): Waiver => ({ id: `${effect} ${throughOn} ${amountCents}`, effect, stage: 'progress', throughOn, amountCents });
const final = (throughOn: string, exceptedCents = 0, effect: Waiver['effect'] = 'unconditional'): Waiver => ({ id: `final ${throughOn}`, effect, stage: 'final', throughOn, exceptedCents });
const one = (more: Partial<Trade>) => {
  const [only] = waiverExposure([trade(more)]).trades;
  if (!only) throw new Error('no trade');
  return only;
};

// Own figures. That a form names through date, sum and exceptions, and that a conditional one needs evidence of payment: Cal. Civ. Code
// 8124, 8132, 8136. That a progress waiver covers no more than its sum and no later work: common practice, no source.
describe('exposure of a trade', () => {
  const invoices = [invoice('2027-03-31', 1_200_000), invoice('2027-04-30', 800_050)];

  it('is everything invoiced while there is no waiver, whatever was paid', () => {
    const paid = one({ invoices, retainageHeldCents: 200_005, payments: [{ on: '2027-04-12', reference: 'Check 1042', amountCents: 1_080_000 }] });
    expect(paid).toMatchObject({ committedCents: 5_000_000, invoicedCents: 2_000_050, invoicedThroughOn: '2027-04-30', retainageHeldCents: 200_005, paidCents: 1_080_000, coveredCents: 0, coveredThroughOn: null, exposureCents: 2_000_050 });
  });

  it('never falls by a conditional waiver, which stands beside it', () => {
    expect(one({ invoices, waivers: [progress('2027-03-31', 1_200_000, 'conditional')] })).toMatchObject({ coveredCents: 0, coveredThroughOn: null, conditionalOnlyCents: 1_200_000, exposureCents: 2_000_050 });
    expect(one({ invoices, waivers: [progress('2027-03-31', 1_200_000), progress('2027-03-31', 1_200_000, 'conditional'), progress('2027-04-30', 800_050, 'conditional')] })).toMatchObject({ coveredCents: 1_200_000, conditionalOnlyCents: 800_050, exposureCents: 800_050 });
    expect(one({ invoices, waivers: [final('2027-05-01', 0, 'conditional')] })).toMatchObject({ conditionalOnlyCents: 2_000_050, exposureCents: 2_000_050 });
  });

  it('ends at the through date: a larger sum covers no later work', () => {
    expect(one({ invoices, waivers: [progress('2027-03-31', 1_500_000)] })).toMatchObject({ coveredCents: 1_200_000, coveredThroughOn: '2027-03-31', exposureCents: 800_050 });
    expect(one({ invoices, waivers: [progress('2027-03-30', 1_500_000)] })).toMatchObject({ coveredCents: 0, exposureCents: 2_000_050 });
    expect(one({ invoices, waivers: [progress('2027-04-30', 1_500_000)] })).toMatchObject({ coveredCents: 1_500_000, exposureCents: 500_050 });
  });

  it('is closed by a final waiver but for what it excepts and what is invoiced after it', () => {
    expect(one({ invoices, waivers: [final('2027-04-30')] }).exposureCents).toBe(0);
    expect(one({ invoices, waivers: [final('2027-04-30', 150_000)] }).exposureCents).toBe(150_000);
    expect(one({ invoices: [...invoices, invoice('2027-05-20', 5_000)], waivers: [final('2027-04-30')] }).exposureCents).toBe(5_000);
    // the excepted sum stays open, whichever of two papers of one day is listed first
    for (const waivers of [[final('2027-04-30', 150_000), progress('2027-04-30', 150_000)], [progress('2027-04-30', 150_000), final('2027-04-30', 150_000)]]) expect(one({ invoices, waivers }).exposureCents).toBe(150_000);
  });

  it('never falls below zero, and adds up over the job', () => {
    const all = waiverExposure([trade({ id: 'a', invoices: [invoice('2027-03-31', 100)], waivers: [progress('2027-12-31', 999_999_999)] }), trade({ id: 'b', invoices: [invoice('2027-03-31', 250)] }), trade({ id: 'c' })]);
    expect([all.trades.map((t) => t.exposureCents), all.exposureCents]).toEqual([[0, 250, 0], 250]);
    expect(waiverExposure([])).toMatchObject({ trades: [], exposureCents: 0 });
  });

  it('carries its arithmetic', () => {
    const { steps } = waiverExposure([trade({ invoices, waivers: [progress('2027-03-31', 1_200_000), final('2027-04-30', 7, 'conditional')], payments: [{ on: '2027-04-12', reference: 'Check 1042', amountCents: 5 }] })]);
    const words = (s: Step): string[] => [s.label, ...s.inputs.flatMap(words)];
    expect(words(steps)).toEqual(expect.arrayContaining(['Open to claims', 'Masonry', 'Invoiced', 'Covered for good', 'Covered once paid', 'Progress waiver through 2027-03-31', 'Final waiver through 2027-04-30', 'Held back from it', '2027-04-12, Check 1042']));
    expect(steps.inputs[0]?.result).toEqual({ kind: 'money', cents: 800_050 });
  });
});

const day = fc.integer({ min: 0, max: 60 }).map((n) => addCalendarDays('2027-01-01', n));
const amount = fc.integer({ min: 0, max: 3_000_000 });
const effect = fc.constantFrom('conditional' as const, 'unconditional' as const);
const anyWaiver: fc.Arbitrary<Waiver> = fc.oneof(
  fc.record({ id: fc.uuid(), effect, stage: fc.constant('progress' as const), throughOn: day, amountCents: amount }),
  fc.record({ id: fc.uuid(), effect, stage: fc.constant('final' as const), throughOn: day, exceptedCents: amount }),
);
const anyTrade: fc.Arbitrary<Trade> = fc.record({ id: fc.uuid(), name: fc.constant('Trade'), committedCents: amount, retainageHeldCents: fc.constant(0), invoices: fc.array(fc.record({ id: fc.uuid(), throughOn: day, amountCents: amount }), { maxLength: 8 }), payments: fc.constant([]), waivers: fc.array(anyWaiver, { maxLength: 8 }) });

describe('properties', () => {
  it('splits what was invoiced into covered and open, within bounds, and the job is the sum of its trades', () => {
    fc.assert(
      fc.property(fc.array(anyTrade, { maxLength: 6 }), (trades) => {
        const all = waiverExposure(trades);
        for (const t of all.trades) {
          expect(t.coveredCents + t.exposureCents).toBe(t.invoicedCents);
          expect(Math.min(t.coveredCents, t.exposureCents, t.conditionalOnlyCents)).toBeGreaterThanOrEqual(0);
          expect(t.conditionalOnlyCents).toBeLessThanOrEqual(t.exposureCents);
        }
        expect(all.exposureCents).toBe(all.trades.reduce((a, t) => a + t.exposureCents, 0));
      }),
    );
  });

  it('does not depend on the order of papers, never rises by a waiver, and never moves by a conditional one', () => {
    fc.assert(
      fc.property(anyTrade, anyWaiver, (t, more) => {
        const before = one(t);
        expect(one({ ...t, invoices: [...t.invoices].reverse(), waivers: [...t.waivers].reverse() })).toMatchObject({ coveredCents: before.coveredCents, conditionalOnlyCents: before.conditionalOnlyCents });
        const after = one({ ...t, waivers: [...t.waivers, more] });
        expect(after.exposureCents).toBeLessThanOrEqual(before.exposureCents);
        if (more.effect === 'conditional') expect(after.exposureCents).toBe(before.exposureCents);
      }),
    );
  });

  it('agrees with progress waivers reckoned day by day in an independent decimal library', () => {
    fc.assert(
      fc.property(anyTrade, (t) => {
        const waivers = t.waivers.filter((w) => w.stage === 'progress' && w.effect === 'unconditional');
        const zero = new Decimal(0);
        const through = (items: readonly { throughOn: string; amountCents: number }[], on: string) => items.filter((x) => x.throughOn <= on).reduce((a, x) => a.plus(new Decimal(x.amountCents).div(100)), zero);
        // each cent is covered by a waiver of its day or a later one: the most that fits under every day's ceiling
        let open = zero;
        for (let n = 0; n <= 60; n += 1) {
          const on = addCalendarDays('2027-01-01', n);
          const given = waivers.reduce((a, w) => (w.stage === 'progress' && w.throughOn === on ? a.plus(new Decimal(w.amountCents).div(100)) : a), zero);
          open = Decimal.min(open.plus(given), through(t.invoices, on));
        }
        expect(one({ ...t, waivers }).coveredCents).toBe(open.times(100).toNumber());
      }),
    );
  });
});

describe('bad input', () => {
  const paid = { on: '2027-04-12', reference: 'Check 1', amountCents: 1 };
  const fails: [string, Partial<Trade>, string][] = [
    ['a negative subcontract', { committedCents: -1 }, 'trades.0.committedCents'],
    ['half a cent', { committedCents: 0.5 }, 'trades.0.committedCents'],
    ['negative retainage', { retainageHeldCents: -1 }, 'trades.0.retainageHeldCents'],
    ['more retainage than was invoiced', { retainageHeldCents: 2, invoices: [invoice('2027-04-30', 1)] }, 'trades.0.retainageHeldCents'],
    ['an invoice twice', { invoices: [invoice('2027-04-30', 1), invoice('2027-04-30', 1)] }, 'trades.0.invoices.1.id'],
    ['an invoice through no day', { invoices: [invoice('2027-04-31', 1)] }, 'trades.0.invoices.0.throughOn'],
    ['a negative invoice', { invoices: [invoice('2027-04-30', -1)] }, 'trades.0.invoices.0.amountCents'],
    ['sums beyond what a number holds', { invoices: [invoice('2027-04-29', Number.MAX_SAFE_INTEGER), invoice('2027-04-30', 1)] }, 'trades.0.invoices'],
    ['a payment on no day', { payments: [{ ...paid, on: 'soon' }] }, 'trades.0.payments.0.on'],
    ['a payment without a reference', { payments: [{ ...paid, reference: ' ' }] }, 'trades.0.payments.0.reference'],
    ['a negative payment', { payments: [{ ...paid, amountCents: -1 }] }, 'trades.0.payments.0.amountCents'],
    ['a waiver twice', { waivers: [final('2027-04-30'), final('2027-04-30')] }, 'trades.0.waivers.1.id'],
    ['a waiver through no day', { waivers: [progress('2027-02-29', 1)] }, 'trades.0.waivers.0.throughOn'],
    ['a negative waiver', { waivers: [progress('2027-02-28', -1)] }, 'trades.0.waivers.0.amountCents'],
    ['a negative exception', { waivers: [final('2027-02-28', -1)] }, 'trades.0.waivers.0.exceptedCents'],
    ['an unknown effect', { waivers: [progress('2027-02-28', 1, 'partial' as never)] }, 'trades.0.waivers.0.effect'],
    ['an unknown stage', { waivers: [{ ...final('2027-02-28'), stage: 'last' as never }] }, 'trades.0.waivers.0.stage'],
  ];
  it.each(fails)('refuses %s and names the field', (_, more, field) => {
    expect(() => waiverExposure([trade(more)])).toThrow(InvalidInput);
    expect(() => waiverExposure([trade(more)])).toThrow(expect.objectContaining({ field }) as Error);
  });
  it('refuses a trade twice', () => expect(() => waiverExposure([trade(), trade()])).toThrow(expect.objectContaining({ field: 'trades.1.id' }) as Error));
});
