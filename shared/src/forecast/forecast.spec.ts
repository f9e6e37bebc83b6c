import { describe, expect, it } from 'vitest';
import { InvalidInput, type Step } from '../arithmetic/index.ts';
import { firstState, type DrawState } from '../draw/index.ts';
import { computeSchedule, type Extension } from '../schedule/index.ts';
import { cashAhead, compareCashAhead, type AheadLine, type AheadLoan, type CashAhead, type CashAheadInput, type CashMonth } from './index.ts';

const line = (id: string, scheduledCents: number, on: string, more: Partial<AheadLine> = {}): AheadLine => ({ id, description: id, scheduledCents, workCents: 0, onHandCents: 0, budgetLineId: id, expected: { on, milestone: { id, name: `Milestone ${id}` } }, ...more });
// own figures, worked by hand: 100,000.00, of which the slab's 20,000.00 are billed, 10 % retained
const base: CashAheadInput = {
  asOf: '2027-03-10',
  lines: [line('slab', 2_000_000, '2027-03-01', { workCents: 2_000_000 }), line('frame', 3_000_000, '2027-03-26'), line('roof', 1_000_000, '2027-04-20'), line('finish', 4_000_000, '2027-06-15')],
  retainage: { workRate: 1000, materialsRate: 1000 },
  release: { finalMonth: '2027-07' },
  deposit: { depositCents: 0, use: 'proportional' },
  before: { ...firstState, earnedCents: 1_800_000, retainageHeldCents: 200_000 },
  reviewDays: 5,
  due: { startsAt: 'approval', days: 10, dayKind: 'calendar', moveToBusinessDay: true, calendar: 'bank' },
  loan: null,
  unpaid: [],
  issued: [],
};
const loan: AheadLoan = {
  constructionCents: 9_000_000,
  fundedCents: 1_800_000,
  holdbackRate: 0,
  equity: { mode: 'first', remainingCents: 200_000 },
  budget: [['slab', 2_000_000], ['frame', 2_000_000], ['roof', 1_000_000], ['finish', 4_000_000]].map(([id, budgetCents]) => ({ id: String(id), name: String(id), budgetCents: Number(budgetCents) })),
  unfunded: 'homeowner_now',
};
const before = (more: Partial<DrawState>): DrawState => ({ ...base.before, ...more });
const column = (ahead: CashAhead, name: keyof CashMonth) => Object.fromEntries(ahead.months.filter((month) => month[name] !== 0).map((month) => [month.month, month[name]]));

describe('cash ahead', () => {
  it('puts each part in the month of forecast + review + payment term, net of retainage, the deposit off', () => {
    const ahead = cashAhead({ ...base, deposit: { depositCents: 1_000_000, use: 'proportional' }, before: before({ depositUsedCents: 200_000 }) });
    expect(column(ahead, 'totalCents')).toEqual({ '2027-04': 2_400_000, '2027-05': 800_000, '2027-06': 3_200_000, '2027-07': 1_000_000 });
    expect(column(ahead, 'runningCents')).toEqual({ '2027-04': 2_400_000, '2027-05': 3_200_000, '2027-06': 6_400_000, '2027-07': 7_400_000 });
    expect(ahead).toMatchObject({ leftToBillCents: 8_200_000, depositLeftCents: 800_000, totalCents: 7_400_000 });
    expect(ahead.months.map(({ month }) => month)).toEqual(['2027-03', '2027-04', '2027-05', '2027-06', '2027-07']);
    const first = cashAhead({ ...base, deposit: { depositCents: 1_000_000, use: 'first' }, before: before({ depositUsedCents: 200_000 }) });
    expect(column(first, 'totalCents')).toEqual({ '2027-04': 1_900_000, '2027-05': 900_000, '2027-06': 3_600_000, '2027-07': 1_000_000 });
  });

  it('lets retainage go in the months of its release, by the terms of the draws', () => {
    const two = cashAhead({ ...base, release: { substantial: { month: '2027-07', keepRate: 2500 }, finalMonth: '2027-09' } });
    expect(column(two, 'totalCents')).toEqual({ '2027-04': 2_700_000, '2027-05': 900_000, '2027-06': 3_600_000, '2027-07': 750_000, '2027-09': 250_000 });
    // half the contract sum is reached in April: no more is kept on what comes after
    const stepped = cashAhead({ ...base, retainage: { ...base.retainage, step: { thresholdRate: 5000, rate: 0, on: 'further_work' } } });
    expect(column(stepped, 'totalCents')).toEqual({ '2027-04': 2_700_000, '2027-05': 1_000_000, '2027-06': 4_000_000, '2027-07': 500_000 });
    const exempt = cashAhead({ ...base, lines: base.lines.map((given) => (given.id === 'finish' ? { ...given, exempt: true } : given)) });
    expect(column(exempt, 'totalCents')).toMatchObject({ '2027-06': 4_000_000, '2027-07': 600_000 });
    // what is billed after the last release has nothing kept back
    expect(column(cashAhead({ ...base, release: { finalMonth: '2027-05' } }), 'totalCents')).toEqual({ '2027-04': 2_700_000, '2027-05': 1_500_000, '2027-06': 4_000_000 });
  });

  it('bills a line evenly by the days of each month, to the cent, and moves its due dates off closed days', () => {
    const lines = [line('supervision', 900_000, '', { expected: { from: '2027-02-01', to: '2027-05-15' } })];
    const ahead = cashAhead({ ...base, lines, retainage: { workRate: 0, materialsRate: 0 }, before: firstState });
    // 22, 30 and 15 days; the last is due on a Sunday before Memorial Day
    expect(column(ahead, 'totalCents')).toEqual({ '2027-04': 295_522, '2027-05': 402_985, '2027-06': 201_493 });
  });

  it('bills materials in place once more of their line is billed', () => {
    const lines = [line('frame', 3_000_000, '2027-03-26', { onHandCents: 500_000 }), line('roof', 1_000_000, '2027-04-20')];
    const ahead = cashAhead({ ...base, lines, retainage: { workRate: 1000, materialsRate: 0 }, before: { ...firstState, earnedCents: 500_000 } });
    expect(column(ahead, 'totalCents')).toEqual({ '2027-04': 2_200_000, '2027-05': 900_000, '2027-07': 400_000 });
  });

  it('takes an overdue draw, and a milestone whose forecast has passed, into this month or what follows from today', () => {
    const unpaid = [{ id: 'd2', label: 'Draw 2', dueOn: '2027-01-15', homeownerCents: 100_000, loanCents: 50_000 }, { id: 'd3', label: 'Draw 3', dueOn: '2027-04-02', homeownerCents: 0, loanCents: 70_000 }];
    const ahead = cashAhead({ ...base, lines: base.lines.map((given) => (given.id === 'frame' ? { ...given, expected: { on: '2026-11-01' } } : given)), unpaid });
    expect(column(ahead, 'totalCents')).toMatchObject({ '2027-03': 2_700_000 + 150_000, '2027-04': 70_000 });
    expect(column(ahead, 'loanCents')).toEqual({ '2027-03': 50_000, '2027-04': 70_000 });
    expect(ahead).toMatchObject({ approvedUnpaidCents: 220_000, totalCents: 8_420_000 });
  });

  it('gives a credit before more than the contract sum is billed, and back where no draw is left to take it', () => {
    const late = cashAhead({ ...base, lines: [...base.lines, line('credit', -600_000, '2027-11-01')], retainage: { workRate: 0, materialsRate: 0 }, before: { ...firstState, earnedCents: 2_000_000 } });
    expect(column(late, 'totalCents')).toEqual({ '2027-04': 3_000_000, '2027-05': 1_000_000, '2027-06': 3_400_000 });
    const after = cashAhead({ ...base, lines: [line('all', 2_000_000, '2027-03-01', { workCents: 2_000_000 }), line('credit', -600_000, '2027-11-01')], retainage: { workRate: 0, materialsRate: 0 }, before: { ...firstState, earnedCents: 2_000_000 } });
    expect(column(after, 'totalCents')).toEqual({ '2027-07': -600_000 });
    expect(after.months.at(-1)?.homeownerCents).toBe(-600_000);
  });

  it('lets what was withheld go with the last retainage, and takes a credit off what comes first', () => {
    const ahead = cashAhead({ ...base, before: before({ withheldCents: 30_000, creditCents: 20_000 }) });
    expect(column(ahead, 'totalCents')).toEqual({ '2027-04': 2_680_000, '2027-05': 900_000, '2027-06': 3_600_000, '2027-07': 1_030_000 });
    expect(ahead.totalCents).toBe(8_210_000);
  });

  it('shows issued changes on top and in no other figure', () => {
    const issued = [{ id: 'c1', label: 'Change 1', cents: 250_000, expectedOn: '2027-04-20' }, { id: 'c2', label: 'Change 2', cents: -40_000, expectedOn: '2027-08-10' }, { id: 'c3', label: 'Change 3', cents: 10_000, expectedOn: '2027-05-20', exempt: true }];
    const ahead = cashAhead({ ...base, issued });
    expect(column(ahead, 'issuedCents')).toEqual({ '2027-05': 225_000, '2027-06': 10_000, '2027-07': 25_000, '2027-08': -40_000 });
    expect(ahead.months.map(({ totalCents }) => totalCents).slice(0, 5)).toEqual(cashAhead(base).months.map(({ totalCents }) => totalCents));
    expect(ahead.months.at(-1)).toMatchObject({ month: '2027-08', totalCents: 0, runningCents: 8_200_000, runningWithIssuedCents: 8_420_000 });
    expect(ahead.issuedCents).toBe(220_000);
  });

  it('is empty when everything is paid', () => {
    const done = cashAhead({ ...base, lines: [line('slab', 2_000_000, '2027-03-01', { workCents: 2_000_000 })], before: { ...firstState, earnedCents: 2_000_000 } });
    expect([done.months, done.totalCents]).toEqual([[], 0]);
  });
});

describe('who pays the months ahead', () => {
  it('uses equity first, then the loan as far as its lines go, and names what nobody funds', () => {
    const ahead = cashAhead({ ...base, loan });
    expect(column(ahead, 'homeownerCents')).toEqual({ '2027-04': 200_000 });
    expect(column(ahead, 'loanCents')).toEqual({ '2027-04': 2_000_000, '2027-05': 900_000, '2027-06': 3_600_000, '2027-07': 700_000 });
    expect(column(ahead, 'notFundedCents')).toEqual({ '2027-04': 500_000, '2027-07': 300_000 });
  });

  it('carries what is not funded to the next month where the contract says so, and the last month keeps it', () => {
    const ahead = cashAhead({ ...base, loan: { ...loan, unfunded: 'carried' } });
    expect(column(ahead, 'carriedCents')).toEqual({ '2027-04': 500_000, '2027-05': 500_000, '2027-06': 500_000 });
    expect(column(ahead, 'notFundedCents')).toEqual({ '2027-07': 800_000 });
    expect(column(ahead, 'totalCents')).toEqual({ '2027-04': 2_200_000, '2027-05': 900_000, '2027-06': 3_600_000, '2027-07': 1_500_000 });
  });

  it('asks the homeowner alone for lines that the lender did not take, maps many lines to one of the budget, and stops at what is undisbursed', () => {
    const own = cashAhead({ ...base, lines: base.lines.map((given) => (given.id === 'roof' ? { ...given, budgetLineId: null } : given)), loan });
    expect(column(own, 'homeownerCents')).toEqual({ '2027-04': 200_000, '2027-05': 900_000, '2027-07': 100_000 });
    const one = cashAhead({ ...base, lines: base.lines.map((given) => ({ ...given, budgetLineId: 'house' })), loan: { ...loan, budget: [{ id: 'house', name: 'House', budgetCents: 9_900_000 }] } });
    expect(column(one, 'notFundedCents')).toEqual({ '2027-07': 800_000 });
    expect(one.months.reduce((total, { loanCents }) => total + loanCents, 0)).toBe(9_000_000 - 1_800_000);
  });

  it('asks for a fixed proportion of equity every month', () => {
    const ahead = cashAhead({ ...base, loan: { ...loan, equity: { mode: 'proportion', rate: 2000 } } });
    expect(column(ahead, 'homeownerCents')).toEqual({ '2027-04': 540_000, '2027-05': 180_000, '2027-06': 720_000, '2027-07': 200_000 });
  });
});

describe('the arithmetic of cash ahead', () => {
  const flat = (step: Step): string[] => [step.label, ...step.inputs.flatMap(flat)];
  it('opens a month down to lines, dates, retainage and who pays', () => {
    const ahead = cashAhead({ ...base, loan, unpaid: [{ id: 'd3', label: 'Draw 3', dueOn: '2027-04-02', homeownerCents: 0, loanCents: 70_000 }], issued: [{ id: 'c1', label: 'Change 1', cents: 5_000, expectedOn: '2027-03-26' }] });
    const april = ahead.steps.inputs.find(({ label }) => label === 'Falls due in April 2027')!;
    expect(flat(april)).toEqual(expect.arrayContaining(['frame', 'Milestone frame finishes', 'Review', 'Due', 'Retainage kept back', 'Retainage held', 'Draw 3', 'The homeowner', 'The loan', 'On top, if signed', 'Change 1']));
    expect(april.result).toEqual({ kind: 'money', cents: 2_770_000 });
  });
});

describe('what a change does to the cash ahead', () => {
  it('is the difference month by month, with running totals where one has no month left', () => {
    const changed = cashAhead({ ...base, lines: [...base.lines.slice(0, 3), line('finish', 4_000_000, '2027-07-15'), line('change', 500_000, '2027-07-15')], release: { finalMonth: '2027-08' } });
    const compared = compareCashAhead(cashAhead(base), changed);
    expect(compared.months.filter(({ totalCents }) => totalCents !== 0).map(({ month, totalCents, runningCents }) => [month, totalCents, runningCents])).toEqual([
      ['2027-06', -3_600_000, -3_600_000],
      ['2027-07', 4_050_000 - 1_000_000, -550_000],
      ['2027-08', 1_050_000, 500_000],
    ]);
    expect(compared).toMatchObject({ changed: ['2027-06', '2027-07', '2027-08'], totalCents: 500_000, lastMonth: { before: '2027-07', after: '2027-08' } });
    expect(compareCashAhead(cashAhead(base), cashAhead(base))).toMatchObject({ changed: [], totalCents: 0 });
  });

  it('follows from the days that a change gives: what the network moves is paid later', () => {
    const ahead = (extensions: Extension[]) => {
      const { milestones } = computeSchedule(
        [{ id: 'frame', name: 'Frame', durationDays: 10, extensions }, { id: 'roof', name: 'Roof', durationDays: 5, predecessors: [{ id: 'frame' }] }],
        { startOn: '2027-03-15', completeBy: '2027-06-30', dayKind: 'working', asOf: base.asOf },
      );
      return cashAhead({ ...base, lines: base.lines.map((given) => ({ ...given, expected: { on: milestones.find(({ id }) => id === given.id)?.forecast.finishOn ?? '2027-06-15' } })) });
    };
    // the frame moves from March 26 to April 2, the roof from April 2 to 9: both still due in April; with three weeks both in May
    expect(compareCashAhead(ahead([]), ahead([{ id: 'c1', label: 'Change 1', days: 5 }])).changed).toEqual([]);
    const moved = compareCashAhead(ahead([]), ahead([{ id: 'c1', label: 'Change 1', days: 15 }]));
    expect(moved.months.filter(({ totalCents }) => totalCents !== 0).map(({ month, totalCents }) => [month, totalCents])).toEqual([['2027-04', -3_600_000], ['2027-05', 3_600_000]]);
  });
});

describe('bad input to cash ahead', () => {
  const withLine = (change: Partial<AheadLine>) => ({ lines: [base.lines[0]!, { ...base.lines[1]!, ...change }] });
  const fails: [string, Partial<CashAheadInput>, string][] = [
    ['a today that does not exist', { asOf: '2027-02-30' }, 'asOf'],
    ['negative review days', { reviewDays: -1 }, 'reviewDays'],
    ['a line billed past its value', withLine({ workCents: 3_000_001 }), 'lines.1.workCents'],
    ['half a cent', withLine({ scheduledCents: 0.5 }), 'lines.1.scheduledCents'],
    ['a line twice', withLine({ id: 'slab' }), 'lines.1.id'],
    ['a forecast that is no day', withLine({ expected: { on: 'soon' } }), 'lines.1.expected.on'],
    ['a forecast in another century', withLine({ expected: { on: '2127-01-01' } }), 'lines.1.expected.on'],
    ['an even share that ends before it begins', withLine({ expected: { from: '2027-05-01', to: '2027-04-01' } }), 'lines.1.expected.to'],
    ['earnings that do not follow from the lines', { before: before({ earnedCents: 1 }) }, 'before.earnedCents'],
    ['negative credit', { before: before({ creditCents: -1 }) }, 'before.creditCents'],
    ['more deposit used than there is', { before: before({ depositUsedCents: 1 }) }, 'before.depositUsedCents'],
    ['a rate over 100 %', { retainage: { workRate: 10_001, materialsRate: 0 } }, 'retainage.workRate'],
    ['a thirteenth month', { release: { finalMonth: '2027-13' } }, 'release.finalMonth'],
    ['a first release after the last', { release: { substantial: { month: '2027-08', keepRate: 0 }, finalMonth: '2027-07' } }, 'release.substantial.month'],
    ['a negative open sum', { unpaid: [{ id: 'd', label: 'd', dueOn: '2027-03-01', homeownerCents: -1, loanCents: 0 }] }, 'unpaid.0.homeownerCents'],
    ['a due date that is no day', { unpaid: [{ id: 'd', label: 'd', dueOn: '2027-03-32', homeownerCents: 1, loanCents: 0 }] }, 'unpaid.0.dueOn'],
    ['an issued change without a day', { issued: [{ id: 'c', label: 'c', cents: 1, expectedOn: '' }] }, 'issued.0.expectedOn'],
    ['a line that maps nowhere', { ...withLine({ budgetLineId: 'nowhere' }), loan }, 'lines.1.budgetLineId'],
    ['a budget line twice', { loan: { ...loan, budget: [...loan.budget, loan.budget[0]!] } }, 'loan.budget.4.id'],
    ['negative equity', { loan: { ...loan, equity: { mode: 'first', remainingCents: -1 } } }, 'loan.equity.remainingCents'],
    ['a negative loan', { loan: { ...loan, constructionCents: -1 } }, 'loan.constructionCents'],
    ['negative payment days', { due: { ...base.due, days: -1 } }, 'days'],
  ];
  it.each(fails)('refuses %s and names the field', (_, change, field) => {
    const attempt = () => cashAhead({ ...base, ...change });
    expect(attempt).toThrow(InvalidInput);
    expect(attempt).toThrow(expect.objectContaining({ field }) as Error);
  });
});
