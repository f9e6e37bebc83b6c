import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { firstState } from '../draw/index.ts';
import { addCalendarDays, dueDate } from '../due/index.ts';
import { cashAhead, compareCashAhead, type AheadLine, type CashAheadInput } from './index.ts';

const TODAY = '2027-03-10';
const day = fc.integer({ min: -60, max: 500 }).map((days) => addCalendarDays(TODAY, days));
const month = fc.integer({ min: -2, max: 20 }).map((months) => addCalendarDays('2027-03-15', months * 30).slice(0, 7));
const cents = fc.integer({ min: 0, max: 9_000_000 });
const rate = fc.integer({ min: 0, max: 2000 });

/** Lines in any state: credits among them, some in part billed, some with materials on hand, some evenly billed. */
const lines = fc.array(
  fc.record({ size: fc.integer({ min: 1, max: 9_000_000 }), credit: fc.boolean(), work: fc.integer({ min: 0, max: 100 }), stored: fc.integer({ min: 0, max: 100 }), exempt: fc.boolean(), on: day, to: fc.option(fc.nat(200)), budget: fc.constantFrom('a', 'b', null) }),
  { minLength: 1, maxLength: 8 },
).map((given) => given.map(({ size, credit, work, stored, exempt, on, to, budget }, i): AheadLine => {
  // a credit stays smaller than the first line, which isn't one, so that the contract sum isn't negative
  const scheduledCents = credit && i > 0 ? -Math.min(size, Math.floor(given[0]!.size / 10)) : size;
  const workCents = Math.trunc((scheduledCents * work) / 100);
  const onHandCents = scheduledCents < 0 ? 0 : Math.trunc(((scheduledCents - workCents) * stored) / 100);
  return { id: `l${i}`, description: `Line ${i}`, scheduledCents, workCents, onHandCents, exempt, budgetLineId: budget, expected: to === null ? { on } : { from: on, to: addCalendarDays(on, to) } };
}));

const inputs = fc.record({
  lines,
  held: fc.nat(100),
  rates: fc.tuple(rate, rate),
  terms: fc.record({ step: fc.boolean(), cap: fc.option(rate), reserve: fc.option(rate) }),
  finalMonth: month,
  substantial: fc.option(fc.record({ month, keepRate: fc.integer({ min: 0, max: 10_000 }) })),
  deposit: fc.record({ depositCents: cents, use: fc.constantFrom('first' as const, 'proportional' as const), used: fc.nat(100) }),
  before: fc.record({ withheldCents: fc.nat(50_000), creditCents: fc.nat(50_000) }),
  reviewDays: fc.nat(20),
  days: fc.nat(60),
  dayKind: fc.constantFrom('calendar' as const, 'working' as const),
  loan: fc.option(fc.record({
    constructionCents: cents,
    fundedCents: cents,
    holdbackRate: rate,
    equity: fc.oneof(fc.record({ mode: fc.constant('first' as const), remainingCents: cents }), fc.record({ mode: fc.constant('proportion' as const), rate: fc.integer({ min: 0, max: 10_000 }) })),
    budget: fc.tuple(cents, cents).map((sums) => sums.map((budgetCents, i) => ({ id: 'ab'[i]!, name: 'ab'[i]!, budgetCents }))),
    unfunded: fc.constantFrom('homeowner_now' as const, 'carried' as const),
  })),
  unpaid: fc.array(fc.record({ id: fc.uuid(), label: fc.constant('Draw'), dueOn: day, homeownerCents: cents, loanCents: cents }), { maxLength: 3 }),
  issued: fc.array(fc.record({ id: fc.uuid(), label: fc.constant('Change'), cents: fc.integer({ min: -500_000, max: 500_000 }), expectedOn: day }), { maxLength: 3 }),
}).map((given): CashAheadInput => {
  const billed = given.lines.reduce((total, { workCents, onHandCents }) => total + workCents + onHandCents, 0);
  const retainageHeldCents = Math.trunc((Math.max(0, billed) * given.held) / 1000);
  const [workRate, materialsRate] = given.terms.step ? [given.rates[0], given.rates[0]] : given.rates;
  const { depositCents, use, used } = given.deposit;
  const substantial = given.substantial && given.substantial.month <= given.finalMonth ? { substantial: given.substantial } : {};
  return {
    asOf: TODAY,
    lines: given.lines,
    retainage: {
      workRate,
      materialsRate,
      ...(given.terms.step ? { step: { thresholdRate: 5000, rate: Math.trunc(workRate / 2), on: 'all_work' as const } } : {}),
      ...(given.terms.cap === null ? {} : { capRate: given.terms.cap }),
      ...(given.terms.reserve === null ? {} : { reserveRate: given.terms.reserve }),
    },
    release: { ...substantial, finalMonth: given.finalMonth },
    deposit: { depositCents, use },
    before: { ...firstState, ...given.before, earnedCents: billed - retainageHeldCents, retainageHeldCents, depositUsedCents: Math.trunc((depositCents * used) / 100) },
    reviewDays: given.reviewDays,
    due: { startsAt: 'approval', days: given.days, dayKind: given.dayKind, moveToBusinessDay: true, calendar: 'bank' },
    loan: given.loan,
    unpaid: given.unpaid,
    issued: given.issued,
  };
});

const total = (values: readonly number[]) => values.reduce((a, b) => a + b, 0);

describe('any cash ahead', () => {
  it('adds up to left to bill + approved and unpaid − deposit not yet used (+ withheld − credit), to the cent', () => {
    fc.assert(
      fc.property(inputs, (input) => {
        const ahead = cashAhead(input);
        const contractSum = total(input.lines.map(({ scheduledCents }) => scheduledCents));
        const open = total(input.unpaid.map(({ homeownerCents, loanCents }) => homeownerCents + loanCents));
        const { earnedCents, withheldCents, creditCents, depositUsedCents } = input.before;
        const expected = contractSum - earnedCents + open + withheldCents - (input.deposit.depositCents - depositUsedCents) - creditCents;
        expect(ahead.totalCents).toBe(expected);
        expect(total(ahead.months.map(({ totalCents }) => totalCents))).toBe(expected);
        expect(total(ahead.months.map(({ issuedCents }) => issuedCents))).toBe(total(input.issued.map(({ cents: price }) => price)));
      }),
      { numRuns: 200 },
    );
  });

  it('has months without gaps from today, parts that make up each, a loan that is never overdrawn, and a credit only at the end', () => {
    fc.assert(
      fc.property(inputs, (input) => {
        const { months } = cashAhead(input);
        const openIn = (name: string) => total(input.unpaid.filter(({ dueOn }) => dueOn.slice(0, 7) === name).map(({ homeownerCents, loanCents }) => homeownerCents + loanCents));
        months.forEach((here, i) => {
          expect(here.month).toBe(i === 0 ? '2027-03' : addCalendarDays(`${months[i - 1]!.month}-28`, 7).slice(0, 7));
          expect(here.homeownerCents + here.loanCents + here.notFundedCents).toBe(here.totalCents);
          expect(here.runningCents).toBe((months[i - 1]?.runningCents ?? 0) + here.totalCents);
          expect(Math.min(here.loanCents, here.notFundedCents, here.carriedCents)).toBeGreaterThanOrEqual(0);
          // only a credit that no later draw could take comes back: what follows are draws approved before
          if (here.homeownerCents < 0) expect(months.slice(i + 1).map(({ totalCents }) => totalCents)).toEqual(months.slice(i + 1).map((after) => openIn(after.month)));
        });
        const fromLoan = total(months.map(({ loanCents }) => loanCents)) - total(input.unpaid.map(({ loanCents }) => loanCents));
        expect(fromLoan).toBeLessThanOrEqual(input.loan ? Math.max(0, input.loan.constructionCents - input.loan.fundedCents) : 0);
      }),
    );
  });

  it('compares so that the differences add up', () => {
    fc.assert(
      fc.property(inputs, inputs, (one, other) => {
        const [before, after] = [cashAhead(one), cashAhead(other)];
        const compared = compareCashAhead(before, after);
        expect(total(compared.months.map(({ totalCents }) => totalCents))).toBe(after.totalCents - before.totalCents);
        expect(compared.months.at(-1)?.runningCents ?? 0).toBe(compared.totalCents);
        for (const { homeownerCents, loanCents, notFundedCents, totalCents } of compared.months) expect(homeownerCents + loanCents + notFundedCents).toBe(totalCents);
      }),
    );
  });
});

describe('an oracle of its own', () => {
  it('gives the same months for plain retainage and a proportional deposit', () => {
    const plain = fc.record({
      parts: fc.array(fc.record({ size: fc.oneof(fc.integer({ min: 1, max: 9_000_000 }), fc.integer({ min: 1, max: 3 })), on: fc.integer({ min: 0, max: 400 }).map((days) => addCalendarDays(TODAY, days)) }), { minLength: 1, maxLength: 12 }),
      workRate: rate,
      depositRate: fc.integer({ min: 0, max: 3000 }),
    });
    fc.assert(
      fc.property(plain, ({ parts, workRate, depositRate }) => {
        const contractSum = total(parts.map(({ size }) => size));
        const depositCents = Math.trunc((contractSum * depositRate) / 10_000);
        const due: CashAheadInput['due'] = { startsAt: 'approval', days: 14, dayKind: 'calendar', moveToBusinessDay: true, calendar: 'bank' };
        const ahead = cashAhead({
          asOf: TODAY,
          lines: parts.map(({ size, on }, i) => ({ id: `l${i}`, description: `Line ${i}`, scheduledCents: size, workCents: 0, onHandCents: 0, expected: { on } })),
          retainage: { workRate, materialsRate: workRate },
          release: { finalMonth: '2029-01' },
          deposit: { depositCents, use: 'proportional' },
          before: firstState,
          reviewDays: 7,
          due,
          loan: null,
          unpaid: [],
          issued: [],
        });
        // billed and retainage from the start of the job each time, in decimals; of the deposit no month uses more than is due in it
        const half = Decimal.ROUND_HALF_UP;
        let [earned, used, running] = [new Decimal(0), new Decimal(0), new Decimal(0)];
        for (const { month: here, runningCents } of ahead.months) {
          const billed = parts.filter(({ on }) => dueDate(due, addCalendarDays(on, 7)).dueOn.slice(0, 7) <= here).reduce((sum, { size }) => sum.plus(size), new Decimal(0));
          const held = here === '2029-01' ? new Decimal(0) : billed.times(workRate).div(10_000).toDecimalPlaces(0, half);
          const falls = billed.minus(held).minus(earned);
          const share = billed.times(depositCents).div(contractSum).toDecimalPlaces(0, half).minus(used);
          const credit = here === '2029-01' ? new Decimal(depositCents).minus(used) : Decimal.max(0, Decimal.min(share, falls));
          earned = earned.plus(falls);
          used = used.plus(credit);
          running = running.plus(falls).minus(credit);
          expect([here, runningCents]).toEqual([here, running.toNumber()]);
        }
      }),
    );
  });
});
