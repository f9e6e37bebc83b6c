import { describe, expect, it } from 'vitest';
import { InvalidInput } from './arithmetic/index.ts';
import { changeEffect, type ChangeSnapshot } from './changes/index.ts';
import { applyObjections, computeDraw, draftDraw, firstState, moveOnHandToWork, withholdingLimit, workFromPercent, type DrawInput, type DrawLine } from './draw/index.ts';
import { addCalendarDays, addDays, closedDays, compoundedLateInterest, daysBetween, dueDate, fromDayNumber, isBusinessDay, lateInterest, nextBusinessDay, weekday, type DueTerms, type LateTerms } from './due/index.ts';
import { distanceM, hammingDistance, placeFinding, reuseFinding, timeFinding } from './evidence/index.ts';
import { dayCount, loanInBalance, loanInterest, mapBudget, whoPays, type WhoPaysInput } from './funding/index.ts';
import { basisPoints, cents, divideRounded, extend, formatMoney, formatRate, minus, parseMoney, parseRate, percentExact, percentOf, split, sum } from './money/index.ts';
import { paidByMilestone, polePicture, withoutPrices, type PoleInput } from './pole/index.ts';
import { billCostPlus, byTiers, lineCents, priceChange, settleAllowance, type PriceLine, type PricingTerms } from './pricing/index.ts';
import { canonicalText } from './record/index.ts';
import { computeSchedule, type ScheduleMilestone } from './schedule/index.ts';
import { waiverExposure } from './waivers/index.ts';

type Case = [what: string, run: () => unknown, field: string];

const NAN = Number.NaN;
const UNSAFE = Number.MAX_SAFE_INTEGER + 1;

const moneyCases: Case[] = [
  ['cents that are text', () => cents('5' as never), 'amount'],
  ['cents under a name', () => cents(0.1, 'draw.due'), 'draw.due'],
  ['basis points of 100.5', () => basisPoints(100.5), 'rate'],
  ['basis points below their least', () => basisPoints(-1, 'terms.rate'), 'terms.rate'],
  ['a sum with one bad part', () => sum([1, NAN]), 'sum'],
  ['a difference of an unsafe number', () => minus(UNSAFE, 1), 'difference'],
  ['a division by a negative number', () => divideRounded(1n, -1n), 'amount'],
  ['a percentage of infinity', () => percentOf(Infinity, 100), 'amount'],
  ['a percentage beyond what a number holds', () => percentOf(Number.MAX_SAFE_INTEGER, 20_000), 'amount'],
  ['an exact percentage of half a cent', () => percentExact(0.5, 100), 'amount'],
  ['a quantity that is a number', () => extend(1 as never, '1'), 'line.quantity'],
  ['a quantity with a comma', () => extend('1,5', '1'), 'line.quantity'],
  ['a quantity with white space', () => extend(' 1', '1'), 'line.quantity'],
  ['a unit cost with five places', () => extend('1', '0.00001'), 'line.unitCost'],
  ['a split of half a cent', () => split(0.5, [1]), 'weights'],
  ['a weight that is not a number', () => split(1, [1, NAN]), 'weights.1'],
  ['typed words', () => parseMoney('a lot', 'price'), 'price'],
  ['a typed third place', () => parseMoney('1.005', 'price'), 'price'],
  ['a typed fourth digit of percent', () => parseRate('1000'), 'rate'],
  ['a printed sum that is no number', () => formatMoney(NAN), 'amount'],
  ['a printed rate of half a basis point', () => formatRate(0.5), 'rate'],
];

const line = (more: Partial<PriceLine> = {}): PriceLine => ({ id: 'l', description: 'Line', class: 'material', effect: 'add', quantity: '1', unit: 'ea', unitCost: '1', taxable: false, ...more });
const terms: PricingTerms = { mode: 'markup', own: { overheadRate: 0, profitRate: 0 }, subcontract: { overheadRate: 0, profitRate: 0 }, profitOn: 'cost', laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'keep', flatFeeCents: 0, insuranceRate: 0 };
const price = (more: object, lines = [line()]) => () => priceChange({ lines, terms: { ...terms, ...more } as PricingTerms });

const pricingCases: Case[] = [
  ['a burden over 300 %', price({ laborBurdenRate: 30_001 }), 'terms.laborBurdenRate'],
  ['a subcontract rate that is not a number', price({ subcontract: { overheadRate: NAN, profitRate: 0 } }), 'terms.subcontract.overheadRate'],
  ['a negative margin', price({ mode: 'margin', marginRate: -1 }), 'terms.marginRate'],
  ['tiers that end with a bound', price({ mode: 'tiers', overhead: [{ upToCents: 5, rate: 0 }], profit: [] }), 'terms.overhead.0.upToCents'],
  ['no tiers of profit', price({ mode: 'tiers', overhead: [{ upToCents: null, rate: 0 }], profit: [] }), 'terms.profit'],
  ['more lines than anybody enters', price({}, Array.from({ length: 10_001 }, (_, i) => line({ id: String(i) }))), 'lines'],
  ['one line alone that is unknown', () => lineCents(line({ class: 'gift' as never })), 'line.class'],
  ['a tier that begins with zero', () => byTiers(1, [{ upToCents: 0, rate: 0 }, { upToCents: null, rate: 0 }]), 'tiers.0.upToCents'],
  ['a mark-up over 100 % of an allowance', () => settleAllowance({ allowanceCents: 0, selectedCostCents: 0, markupRate: 10_001 }), 'markupRate'],
  ['a negative fee', () => billCostPlus({ costToDateCents: 0, feeToDateCents: -1, ceilingCents: 1, savingsShareRate: 0, complete: false }), 'feeToDateCents'],
  ['more than the whole of the savings', () => billCostPlus({ costToDateCents: 0, feeToDateCents: 0, ceilingCents: 1, savingsShareRate: 10_001, complete: true }), 'savingsShareRate'],
];

const drawLine = (more: Partial<DrawLine> = {}): DrawLine => ({ id: 'a', description: 'Frame', scheduledCents: 1_000, workCents: 0, onHandCents: 0, approvedWorkCents: 0, approvedOnHandCents: 0, ...more });
const drawInput: DrawInput = { style: 'percent_complete', contractSumAsSignedCents: 1_000, changesApprovedCents: 0, lines: [drawLine()], retainage: { workRate: 0, materialsRate: 0 }, release: { at: 'none' }, deposit: { depositCents: 0, use: 'first' }, withheldCents: 0, before: firstState, throughOn: '2027-03-15', isFinal: false };
const draw = (more: Partial<DrawInput>) => () => computeDraw({ ...drawInput, ...more });

const drawCases: Case[] = [
  ['a period to a day that does not exist', draw({ throughOn: '2027-02-30' }), 'throughOn'],
  ['an approved sum that is not a number', draw({ lines: [drawLine({ approvedWorkCents: NAN })] }), 'lines.0.approvedWorkCents'],
  ['materials of half a cent', draw({ lines: [drawLine({ onHandCents: 0.5 })] }), 'lines.0.onHandCents'],
  ['more than the contract over its lines', draw({ lines: [drawLine({ workCents: 600 }), drawLine({ id: 'b', workCents: 600 })] }), 'lines'],
  ['a keep rate over 100 %', draw({ release: { at: 'substantial_completion', keepRate: 10_001 } }), 'release.keepRate'],
  ['a multiple over 500 %', draw({ release: { at: 'substantial_completion', punchListCents: 1, multipleRate: 50_001 } }), 'release.multipleRate'],
  ['a withholding of half a cent', draw({ withheldCents: 0.5 }), 'withheldCents'],
  ['a deposit that is not a number', draw({ deposit: { depositCents: NAN, use: 'first' } }), 'deposit.depositCents'],
  ['a negative credit of the last draw', draw({ before: { ...firstState, creditCents: -1 } }), 'before.creditCents'],
  ['a changed sum beyond what a number holds', draw({ changesApprovedCents: Number.MAX_SAFE_INTEGER }), 'contractSumToday'],
  ['an objection of nothing', () => applyObjections([drawLine({ workCents: 5 })], [{ lineId: 'a', cents: 0, reason: 'x' }]), 'objections.0.cents'],
  ['a negative move of materials', () => moveOnHandToWork(drawLine({ onHandCents: 5 }), -1), 'amount'],
  ['a percentage of work that is not a number', () => workFromPercent(100, NAN), 'workRate'],
  ['an inspected percent over 100', () => draftDraw({ style: 'percent_complete', lines: [{ ...drawLine(), milestone: { state: 'under_way', inspectedRate: 10_001 } }], elapsedDays: 0, contractDays: 1 }), 'lines.0.inspectedRate'],
  ['half a day of a contract', () => draftDraw({ style: 'percent_complete', lines: [], elapsedDays: 0, contractDays: 1.5 }), 'contractDays'],
  ['a dispute of half a cent', () => withholdingLimit(0.5, 15_000), 'disputedCents'],
  ['a limit over 300 %', () => withholdingLimit(1, 30_001), 'limitRate'],
];

const who: WhoPaysInput = { dueNowCents: 100, ownLines: { toDateCents: 0, beforeCents: 0 }, equity: { mode: 'first', remainingCents: 0 }, loan: { undisbursedCents: 100, fundedBeforeCents: 0, holdbackRate: 0, budget: [] }, unfunded: 'carried' };
const loan = (more: object) => () => whoPays({ ...who, loan: { undisbursedCents: 100, fundedBeforeCents: 0, holdbackRate: 0, budget: [], ...more } });
const balance = { contractSumTodayCents: 1, paidToDateCents: 0, openDirectivesCents: 0, undisbursedCents: 0, equityCommittedCents: 0, contingencyCents: 0 };

const fundingCases: Case[] = [
  ['a due of half a cent', () => whoPays({ ...who, dueNowCents: 0.5 }), 'dueNowCents'],
  ['own lines that are not a number', () => whoPays({ ...who, ownLines: { toDateCents: NAN, beforeCents: 0 } }), 'ownLines.toDateCents'],
  ['own lines before that are not a number', () => whoPays({ ...who, ownLines: { toDateCents: 0, beforeCents: NAN } }), 'ownLines.beforeCents'],
  ['a proportion that is not a number', () => whoPays({ ...who, equity: { mode: 'proportion', rate: NAN } }), 'equity.rate'],
  ['a negative funded sum', loan({ fundedBeforeCents: -1 }), 'loan.fundedBeforeCents'],
  ['a negative line of the budget', loan({ budget: [{ id: 'a', name: 'a', budgetCents: -1, approvedNetCents: 0, allowedRate: 0 }] }), 'loan.budget.0.budgetCents'],
  ['an approved sum of half a cent', loan({ budget: [{ id: 'a', name: 'a', budgetCents: 1, approvedNetCents: 0.5, allowedRate: 0 }] }), 'loan.budget.0.approvedNetCents'],
  ['a negative contract', () => loanInBalance({ ...balance, contractSumTodayCents: -1 }), 'contractSumTodayCents'],
  ['half a cent of directives', () => loanInBalance({ ...balance, openDirectivesCents: 0.5 }), 'openDirectivesCents'],
  ['a mapped sum that is not a number', () => mapBudget(['a'], [{ lineId: '1', budgetLineId: 'a', cents: NAN }]), 'lines.0.cents'],
  ['a balance from words', () => loanInterest('actual/360', 500, [{ from: 'then', to: '2026-05-01', balanceCents: 1 }]), 'from'],
  ['a count to a thirteenth month', () => dayCount('30/360', '2026-01-01', '2026-13-01'), 'to'],
];

const due: DueTerms = { startsAt: 'request', days: 14, dayKind: 'calendar', moveToBusinessDay: true, calendar: 'office' };
const late: LateTerms = { rate: 650, per: 'year', basis: 360, graceDays: 0, grace: 'forgives' };
const overdue = (more: object, payment: object = {}) => () => lateInterest({ ...late, ...more } as LateTerms, { amountCents: 100, dueOn: '2026-01-01', paidOn: '2026-01-11', ...payment });

const dueCases: Case[] = [
  ['a due date after half a day', () => dueDate({ ...due, days: 0.5 }, '2026-01-01'), 'days'],
  ['a due date from no day', () => dueDate(due, '2026-06-31'), 'date'],
  ['days between words', () => daysBetween('2026-01-01', 'later'), 'to'],
  ['half a calendar day more', () => addCalendarDays('2026-01-01', 0.5), 'days'],
  ['endless calendar days', () => addCalendarDays('2026-01-01', Infinity), 'days'],
  ['a day that is not a number', () => fromDayNumber(NAN), 'day'],
  ['a day after the year 9999', () => addCalendarDays('9999-12-31', 1), 'day'],
  ['working days from no day', () => addDays('working', '2026-00-10', 1), 'date'],
  ['a weekday of nothing', () => weekday(''), 'date'],
  ['a business day of words', () => isBusinessDay('bank', 'today'), 'date'],
  ['the next business day of words', () => nextBusinessDay('bank', 'today'), 'date'],
  ['closed days of half a year', () => closedDays('office', 2026.5), 'date'],
  ['a cap of half a basis point', overdue({ capRate: 0.5 }), 'terms.capRate'],
  ['a negative cap', overdue({ capRate: -1 }), 'terms.capRate'],
  ['a year of 364 days', overdue({ basis: 364 }), 'terms.basis'],
  ['grace of half a day', overdue({ graceDays: 0.5 }), 'terms.graceDays'],
  ['paid on no day', overdue({}, { paidOn: '2026-02-29' }), 'to'],
  ['compounding over thirteen months', () => compoundedLateInterest({ amountCents: 1, rate: 1, months: 13, days: 0 }), 'months'],
];

const SITE = { latitude: 39.4, longitude: -84.5, radiusM: 75 };
const photo = { latitude: 39.4, longitude: -84.5, accuracyM: 5 };
const pole: PoleInput = { milestones: [], general: { scheduledCents: 100, provenCents: 0, billedCents: 0, paidCents: 0 }, expectedTodayCents: null, prices: true };

const evidenceCases: Case[] = [
  ['a place beyond the date line', () => distanceM({ latitude: 0, longitude: 181 }, SITE), 'a.longitude'],
  ['a place that is not a number', () => distanceM(SITE, { latitude: NAN, longitude: 0 }), 'b.latitude'],
  ['a negative accuracy', () => placeFinding({ ...photo, accuracyM: -1 }, SITE), 'photo.accuracyM'],
  ['an accuracy that is not a number', () => placeFinding({ ...photo, accuracyM: NAN }, SITE), 'photo.accuracyM'],
  ['a negative radius', () => placeFinding(photo, { ...SITE, radiusM: -1 }), 'site.radiusM'],
  ['a radius without end', () => placeFinding(photo, { ...SITE, radiusM: Infinity }), 'site.radiusM'],
  ['a photo of no day', () => timeFinding({ takenOn: '2026-11-31', beganOn: null, claimedOn: null }), 'takenOn'],
  ['work from no day', () => timeFinding({ takenOn: '2026-11-01', beganOn: 'June', claimedOn: null }), 'beganOn'],
  ['a claim on no day', () => timeFinding({ takenOn: '2026-11-01', beganOn: null, claimedOn: '2026-1-1' }), 'claimedOn'],
  ['bits that are not a number', () => reuseFinding({ bits: NAN, sameJob: null }), 'bits'],
  ['negative bits', () => reuseFinding({ bits: -1, sameJob: null }), 'bits'],
  ['a hash in capitals', () => hammingDistance('00000000000000F0', '0000000000000010'), 'a'],
  ['a hash cut short', () => hammingDistance('0000000000000010', '10'), 'b'],
  ['a rod of no height', () => polePicture(pole, 0), 'height'],
  ['a rod without end', () => polePicture(pole, Infinity), 'height'],
  ['a share of half a cent', () => polePicture({ ...pole, general: { ...pole.general, provenCents: 0.5 } }, 100), 'general.provenCents'],
  ['an expected sum of half a cent, seen without prices', () => withoutPrices({ ...pole, expectedTodayCents: 0.5 }), 'expectedTodayCents'],
  ['a paid sum of half a cent', () => paidByMilestone([{ billed: [{ milestoneId: null, cents: 5 }], paidCents: 0.5 }]), 'draws.0.paidCents'],
  ['a billed sum of half a cent', () => paidByMilestone([{ billed: [{ milestoneId: null, cents: 0.5 }], paidCents: 1 }]), 'draws.0.billed.0.cents'],
];

const snapshot: ChangeSnapshot = {
  job: { contractSumAsSignedCents: 1_000, changesApprovedCents: 0, completeBy: '2027-10-22', dayKind: 'working', daysApproved: 0, earnedToDateCents: 0, hasLoan: false, consentLimitCents: null },
  change: { number: 1, revision: '', title: 'x', reason: 'x', chargedCents: 0, days: 0, goodUntil: '2027-03-19', structural: false, milestoneName: null, lines: [], scope: [], photos: [], reviews: [] },
};
const milestone = (more: Partial<ScheduleMilestone> = {}): ScheduleMilestone => ({ id: 'a', name: 'Frame', durationDays: 5, ...more });
const schedule = (milestones: ScheduleMilestone[]) => () => computeSchedule(milestones, { startOn: '2027-03-01', completeBy: '2027-10-22', dayKind: 'working' });

const otherCases: Case[] = [
  ['a change of half a cent', () => changeEffect({ ...snapshot, change: { ...snapshot.change, chargedCents: 0.5 } }), 'sum'],
  ['a change of negative days', () => changeEffect({ ...snapshot, change: { ...snapshot.change, days: -1 } }), 'days'],
  ['a negative duration', schedule([milestone({ durationDays: -1 })]), 'milestones.0.durationDays'],
  ['a milestone twice', schedule([milestone(), milestone()]), 'milestones.1.id'],
  ['a text that is no JSON', () => canonicalText({ rate: NAN }), 'value.rate'],
  ['a waiver through no day', () => waiverExposure([{ id: 't', name: 'Trade', committedCents: 0, retainageHeldCents: 0, invoices: [], payments: [], waivers: [{ id: 'w', effect: 'conditional', stage: 'final', throughOn: '2027-04-31', exceptedCents: 0 }] }]), 'trades.0.waivers.0.throughOn'],
];

const every: readonly Case[] = [...moneyCases, ...pricingCases, ...drawCases, ...fundingCases, ...dueCases, ...evidenceCases, ...otherCases];

describe('bad input over all computations', () => {
  it('is tried in at least sixty ways, none of them twice', () => {
    expect(every.length).toBeGreaterThanOrEqual(60);
    expect(new Set(every.map(([what]) => what)).size).toBe(every.length);
  });

  it.each(every)('refuses %s and names the field', (_, run, field) => {
    let thrown: unknown;
    try {
      run();
    } catch (error) {
      thrown = error;
    }
    expect(thrown).toBeInstanceOf(InvalidInput);
    expect(thrown).toMatchObject({ name: 'InvalidInput', field });
    expect((thrown as InvalidInput).rule).toMatch(/^must /);
    expect((thrown as InvalidInput).message).toContain(`${field}: must `);
  });
});
