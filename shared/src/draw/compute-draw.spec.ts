import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { applyObjections, computeDraw, draftDraw, firstState, moveOnHandToWork, withholdingLimit, workFromPercent, type DrawInput, type DrawLine, type DrawState, type RetainageTerms } from './index.ts';

const line = (given: Partial<DrawLine> & { id: string }): DrawLine => ({ description: given.id, scheduledCents: 0, workCents: 0, onHandCents: 0, approvedWorkCents: 0, approvedOnHandCents: 0, ...given });
const base: DrawInput = {
  style: 'percent_complete',
  contractSumAsSignedCents: 10_000_000,
  changesApprovedCents: 0,
  lines: [],
  retainage: { workRate: 0, materialsRate: 0 },
  release: { at: 'none' },
  deposit: { depositCents: 0, use: 'proportional' },
  withheldCents: 0,
  before: firstState,
  throughOn: '2027-03-15',
  isFinal: false,
};
const rates = (workRate: number, materialsRate = workRate): RetainageTerms => ({ workRate, materialsRate });

describe('published forms and vouchers', () => {
  // Caltrans, public payment vouchers: 5 % of 28,422,265.70 is exactly 1,421,113.285 and was printed as 1,421,113.29; this period
  // 32,724.15 = what is held on the cumulative figure less what was held before (voucher 04-253794-019).
  it('holds what a state printed on its voucher', () => {
    const held = (workCents: number, before: DrawState = firstState) =>
      computeDraw({ ...base, contractSumAsSignedCents: 4_000_000_000, retainage: rates(500), lines: [line({ id: 'all', scheduledCents: 4_000_000_000, workCents, approvedWorkCents: 0 })], before });
    const last = held(2_842_226_570 - 65_448_290);
    const now = held(2_842_226_570, last.after);
    expect(now.summary.retainageHeldCents).toBe(142_111_329);
    expect(now.summary.retainageHeldCents - last.summary.retainageHeldCents).toBe(3_272_415);
    expect(now.summary.dueNowCents).toBe(65_448_290 - 3_272_415);
  });

  // Form RD 1924-18 (Rev. 6-97) lines 1–9, own figures by the published rule: retainage is 10 % of work and materials.
  it('follows the arithmetic of a federal partial payment estimate', () => {
    const { summary } = computeDraw({
      ...base,
      contractSumAsSignedCents: 41_200_000,
      changesApprovedCents: 865_000,
      retainage: rates(1000),
      lines: [line({ id: 'all', scheduledCents: 42_065_000, workCents: 18_642_000, onHandCents: 1_425_000 })],
      before: { ...firstState, earnedCents: 12_133_800 },
    });
    expect(summary).toMatchObject({ contractSumTodayCents: 42_065_000, retainageHeldCents: 2_006_700, dueNowCents: 5_926_500 });
    expect(summary.workInPlaceCents + summary.materialsOnHandCents).toBe(20_067_000);
  });

  // Orange County NC form lines 1–9, own figures by the published rule: 10 % on work, 5 % on stored materials.
  it('follows the arithmetic of a county form with two rates', () => {
    const { summary } = computeDraw({
      ...base,
      contractSumAsSignedCents: 25_000_000,
      changesApprovedCents: -320_000,
      retainage: rates(1000, 500),
      lines: [line({ id: 'all', scheduledCents: 24_680_000, workCents: 11_840_000, onHandCents: 960_000 })],
      before: { ...firstState, earnedCents: 8_415_000 },
    });
    expect(summary).toMatchObject({ contractSumTodayCents: 24_680_000, retainageHeldCents: 1_184_000 + 48_000, earnedToDateCents: 11_568_000, dueNowCents: 3_153_000, leftToBillCents: 13_112_000 });
  });

  // HUD Mortgagee Letter 92-33 item 1.A, own figures by the published rule: 10 % of each release is held.
  it('holds ten percent of each release of a rehabilitation loan', () => {
    let before = firstState;
    const paid: number[] = [];
    let workCents = 0;
    for (const part of [1_500_000, 2_250_000, 833_333]) {
      const done = computeDraw({ ...base, retainage: rates(1000), lines: [line({ id: 'all', scheduledCents: 10_000_000, workCents: (workCents += part) })], before });
      paid.push(done.summary.dueNowCents);
      before = done.after;
    }
    expect([paid, before.retainageHeldCents]).toEqual([[1_350_000, 2_025_000, 750_000], 458_333]);
  });

  // 150 % (Cal. Civ. Code 8800) and 110 % (Tex. Prop. Code 28.003, one- to four-family homes) of the disputed sum.
  it('limits a withholding as the statutes do', () => {
    expect([withholdingLimit(240_000, 15_000), withholdingLimit(240_000, 11_000), withholdingLimit(240_000, 10_000)]).toEqual([360_000, 264_000, 240_000]);
  });
});

const anyLines = fc
  .array(fc.record({ scheduled: fc.integer({ min: 0, max: 5_000_000 }), work: fc.integer({ min: 0, max: 100 }), onHand: fc.integer({ min: 0, max: 100 }), exempt: fc.boolean() }), { minLength: 1, maxLength: 30 })
  .map((given) =>
    given.map(({ scheduled, work, onHand, exempt }, i) => {
      const workCents = Math.floor((scheduled * work) / 100);
      return line({ id: `l${i}`, scheduledCents: scheduled, workCents, onHandCents: Math.floor(((scheduled - workCents) * onHand) / 100), exempt });
    }),
  );
const anyTerms: fc.Arbitrary<RetainageTerms> = fc
  .record({ rate: fc.integer({ min: 0, max: 1500 }), step: fc.option(fc.record({ thresholdRate: fc.integer({ min: 1, max: 9000 }), share: fc.integer({ min: 0, max: 100 }), on: fc.constantFrom('further_work' as const, 'all_work' as const) })), cap: fc.option(fc.integer({ min: 0, max: 1000 })), reserve: fc.option(fc.integer({ min: 0, max: 1000 })) })
  .map(({ rate, step, cap, reserve }) => ({
    ...rates(rate),
    ...(step ? { step: { thresholdRate: step.thresholdRate, rate: Math.floor((rate * step.share) / 100), on: step.on } } : {}),
    ...(cap === null ? {} : { capRate: cap }),
    ...(reserve === null ? {} : { reserveRate: reserve }),
  }));
const contractOf = (lines: readonly DrawLine[]) => lines.reduce((a, l) => a + l.scheduledCents, 0);

describe('properties of a draw', () => {
  it('adds up, whatever the lines: parts of the sum, shares per line, and nothing below zero, above the cap or below the reserve', () => {
    fc.assert(
      fc.property(anyLines, anyTerms, fc.integer({ min: 0, max: 500_000 }), (lines, retainage, deposit) => {
        const contractSumAsSignedCents = contractOf(lines);
        const { summary: s, lines: out, steps } = computeDraw({ ...base, contractSumAsSignedCents, lines, retainage, deposit: { depositCents: Math.min(deposit, contractSumAsSignedCents), use: 'proportional' } });
        const billed = s.workInPlaceCents + s.materialsOnHandCents;
        expect(s.earnedToDateCents).toBe(billed - s.retainageHeldCents);
        expect(s.dueNowCents - s.creditCarriedCents).toBe(s.earnedToDateCents - s.billedBeforeCents - s.depositUsedNowCents);
        expect(s.earnedToDateCents + s.leftToBillCents).toBe(s.contractSumTodayCents);
        expect(s.retainageHeldCents).toBeGreaterThanOrEqual(0);
        const cap = retainage.capRate === undefined ? Infinity : Math.round((contractSumAsSignedCents * retainage.capRate) / 10_000);
        expect(s.retainageHeldCents).toBeLessThanOrEqual(cap);
        const reserve = retainage.reserveRate === undefined ? 0 : Math.floor((billed * retainage.reserveRate) / 10_000);
        expect(s.retainageHeldCents).toBeGreaterThanOrEqual(Math.min(reserve, cap));
        const shares = out.reduce((a, l) => a + l.retainageCents, 0);
        if (lines.some((l) => !l.exempt && l.workCents + l.onHandCents > 0) && retainage.workRate > 0) expect(shares).toBe(s.retainageHeldCents);
        expect(steps?.dueNow.result).toEqual({ kind: 'money', cents: s.dueNowCents });
      }),
    );
  });

  it('does not depend on the order of lines', () => {
    fc.assert(
      fc.property(anyLines, anyTerms, (lines, retainage) => {
        const input = { ...base, contractSumAsSignedCents: contractOf(lines), retainage };
        expect(computeDraw({ ...input, lines: [...lines].reverse() }).summary).toEqual(computeDraw({ ...input, lines }).summary);
      }),
    );
  });

  it('stays the same when it is recomputed from its approved figures', () => {
    fc.assert(
      fc.property(anyLines, anyTerms, (lines, retainage) => {
        const input = { ...base, contractSumAsSignedCents: contractOf(lines), lines, retainage };
        const once = computeDraw(input);
        const again = computeDraw({ ...input, before: once.after, lines: lines.map((l) => ({ ...l, approvedWorkCents: l.workCents, approvedOnHandCents: l.onHandCents })) });
        expect(again.summary).toMatchObject({ retainageHeldCents: once.summary.retainageHeldCents, earnedToDateCents: once.summary.earnedToDateCents, dueNowCents: 0, creditCarriedCents: 0 });
        expect(again.lines.every((l) => l.thisDrawCents === 0)).toBe(true);
      }),
    );
  });
});

interface Move {
  work: number[];
  onHand: number[];
  change: number;
  object: boolean;
}
const moves = fc.array(fc.record({ work: fc.array(fc.integer({ min: 0, max: 100 }), { minLength: 5, maxLength: 5 }), onHand: fc.array(fc.integer({ min: 0, max: 60 }), { minLength: 5, maxLength: 5 }), change: fc.integer({ min: -200_000, max: 300_000 }), object: fc.boolean() }), { minLength: 1, maxLength: 40 });

/** Plays draws one after the other, each from what the one before left; returns what was paid and the last state. */
function play(sequence: Move[], retainage: RetainageTerms, deposit: number) {
  let lines = [900_000, 1_234_567, 333_333, 2_000_001, 532_099].map((scheduledCents, i) => line({ id: `l${i}`, scheduledCents, exempt: i === 4 }));
  const contract = contractOf(lines);
  let changes = 0;
  let before = firstState;
  let paid = deposit;
  let latched: number | null = null;
  const draw = (next: DrawLine[], more: Partial<DrawInput> = {}) => {
    const done = computeDraw({ ...base, contractSumAsSignedCents: contract, changesApprovedCents: changes, retainage, deposit: { depositCents: deposit, use: 'proportional' }, before, lines: next, ...more });
    if (latched !== null) expect(done.after.latchedCents).toBe(latched);
    latched = done.after.latchedCents;
    before = done.after;
    paid += done.summary.dueNowCents;
    lines = next.map((l) => ({ ...l, approvedWorkCents: l.workCents, approvedOnHandCents: l.onHandCents }));
    return done;
  };
  sequence.forEach((move, n) => {
    const add = Math.max(0, move.change);
    if (add > 0) {
      changes += add;
      lines.push(line({ id: `c${n}`, scheduledCents: add }));
    }
    let next = lines.map((l, i) => {
      const workCents = Math.max(l.approvedWorkCents, Math.floor((l.scheduledCents * (move.work[i % 5] ?? 0)) / 100));
      return { ...l, workCents, onHandCents: Math.floor(((l.scheduledCents - workCents) * (move.onHand[i % 5] ?? 0)) / 100) };
    });
    const asking = next.find((l) => l.workCents + l.onHandCents - l.approvedWorkCents - l.approvedOnHandCents > 1);
    if (move.object && asking) next = applyObjections(next, [{ lineId: asking.id, cents: 1, reason: 'Not seen yet.' }]);
    draw(next);
  });
  const whole = lines.map((l) => ({ ...l, workCents: l.scheduledCents, onHandCents: 0 }));
  draw(whole, { release: { at: 'substantial_completion', punchListCents: 10_000, multipleRate: 15_000 } });
  const last = draw(whole, { isFinal: true, release: { at: 'final' }, reserveOver: true });
  return { paid, contractSumToday: contract + changes, last };
}

describe('a whole contract', () => {
  it('ends with everything paid after any sequence of draws, changes, objections, steps, deposit and releases', () => {
    fc.assert(
      fc.property(moves, anyTerms, fc.integer({ min: 0, max: 400_000 }), (sequence, retainage, deposit) => {
        const { paid, contractSumToday, last } = play(sequence, retainage, deposit);
        expect(last.summary.retainageHeldCents).toBe(0);
        expect(last.summary.leftToBillCents).toBe(0);
        expect(paid - last.summary.creditCarriedCents).toBe(contractSumToday);
      }),
      { numRuns: 200 },
    );
  });

  it('keeps the threshold once it was reached, and lowers what is held on further work', () => {
    const retainage: RetainageTerms = { ...rates(1000), step: { thresholdRate: 5000, rate: 500, on: 'further_work' } };
    const at = (workCents: number, before: DrawState, changes = 0) => computeDraw({ ...base, changesApprovedCents: changes, retainage, before, lines: [line({ id: 'a', scheduledCents: 10_000_000 + changes, workCents })] });
    const half = at(5_000_000, firstState);
    expect([half.after.latchedCents, half.summary.retainageHeldCents]).toEqual([5_000_000, 500_000]);
    const more = at(6_000_000, half.after, 4_000_000);
    expect([more.after.latchedCents, more.summary.retainageHeldCents]).toEqual([5_000_000, 550_000]);
    const all = computeDraw({ ...base, retainage: { ...rates(1000), step: { thresholdRate: 5000, rate: 500, on: 'all_work' } }, lines: [line({ id: 'a', scheduledCents: 10_000_000, workCents: 6_000_000 })] });
    expect(all.summary.retainageHeldCents).toBe(300_000);
  });

  it('holds a multiple of the punch list at substantial completion, never below the reserve', () => {
    const lines = [line({ id: 'a', scheduledCents: 10_000_000, workCents: 10_000_000 })];
    const release = { at: 'substantial_completion' as const, punchListCents: 100_000, multipleRate: 15_000 };
    expect(computeDraw({ ...base, lines, retainage: rates(1000), release }).summary.retainageHeldCents).toBe(150_000);
    expect(computeDraw({ ...base, lines, retainage: { ...rates(1000), reserveRate: 300 }, release }).summary.retainageHeldCents).toBe(300_000);
  });

  it('carries a negative due to the next draw as a credit', () => {
    const lines = (workCents: number, correction = false) => [line({ id: 'a', scheduledCents: 1_000_000, workCents, approvedWorkCents: 400_000, correction })];
    const back = computeDraw({ ...base, lines: lines(300_000, true), before: { ...firstState, earnedCents: 400_000 } });
    expect(back.summary).toMatchObject({ dueNowCents: 0, creditCarriedCents: 100_000 });
    const next = computeDraw({ ...base, lines: lines(550_000), before: back.after });
    expect(next.summary).toMatchObject({ creditBeforeCents: 100_000, dueNowCents: 150_000 });
  });

  it('holds a withheld sum back and pays it when it is let go', () => {
    const lines = [line({ id: 'a', scheduledCents: 1_000_000, workCents: 500_000 })];
    const held = computeDraw({ ...base, lines, withheldCents: 60_000 });
    expect(held.summary.dueNowCents).toBe(440_000);
    expect(computeDraw({ ...base, lines, before: held.after }).summary.dueNowCents).toBe(60_000);
  });
});

describe('drafting from proof', () => {
  const draft = (milestone: Parameters<typeof draftDraw>[0]['lines'][number]['milestone'], style: DrawInput['style'] = 'percent_complete') => {
    const { workCents: _w, onHandCents: _o, ...rest } = line({ id: 'a', scheduledCents: 1_000_001 });
    return draftDraw({ style, lines: [{ ...rest, milestone }], elapsedDays: 73, contractDays: 292 })[0]?.workCents;
  };
  it('bills what is proven whole, what is under way as inspected, general lines by time, the rest not', () => {
    expect(draft({ state: 'proven', inspectedRate: 10_000 })).toBe(1_000_001);
    expect(draft({ state: 'under_way', inspectedRate: 3500 })).toBe(350_000);
    expect(draft({ state: 'upcoming', inspectedRate: 0 })).toBe(0);
    expect(draft(null)).toBe(250_000);
    expect(draft({ state: 'under_way', inspectedRate: 3500 }, 'milestone_sums')).toBe(0);
  });
  it('fixes work from a percentage and moves materials into the work', () => {
    expect(workFromPercent(333_333, 5000)).toBe(166_667);
    expect(moveOnHandToWork(line({ id: 'a', scheduledCents: 100, onHandCents: 60 }), 60)).toMatchObject({ workCents: 60, onHandCents: 0 });
  });
});

describe('bad input to a draw', () => {
  const one = (given: Partial<DrawLine>, more: Partial<DrawInput> = {}) => () => computeDraw({ ...base, lines: [line({ id: 'a', scheduledCents: 1_000, ...given })], ...more });
  const fails: [string, () => unknown, string][] = [
    ['less than was approved', one({ workCents: 1, approvedWorkCents: 2 }), 'lines.0.workCents'],
    ['negative work', one({ workCents: -1 }), 'lines.0.workCents'],
    ['negative materials', one({ onHandCents: -1 }), 'lines.0.onHandCents'],
    ['more than the line', one({ workCents: 1_001 }), 'lines.0.workCents'],
    ['more with its materials', one({ workCents: 900, onHandCents: 101 }), 'lines.0.workCents'],
    ['half a cent', one({ workCents: 0.5 }), 'lines.0.workCents'],
    ['a line twice', () => computeDraw({ ...base, lines: [line({ id: 'a' }), line({ id: 'a' })] }), 'lines.1.id'],
    ['more than the contract', () => computeDraw({ ...base, contractSumAsSignedCents: 999, lines: [line({ id: 'a', scheduledCents: 1_000, workCents: 1_000 })] }), 'lines'],
    ['a contract below zero', one({}, { changesApprovedCents: -10_000_001 }), 'contractSumAsSignedCents'],
    ['a period before the last', one({}, { before: { ...firstState, throughOn: '2027-03-16' } }), 'throughOn'],
    ['no date', one({}, { throughOn: 'March' }), 'throughOn'],
    ['a negative withholding', one({}, { withheldCents: -1 }), 'withheldCents'],
    ['a rate over 100 %', one({}, { retainage: rates(10_001) }), 'retainage.workRate'],
    ['a negative rate', one({}, { retainage: rates(0, -1) }), 'retainage.materialsRate'],
    ['two rates with a step', one({}, { retainage: { workRate: 1000, materialsRate: 500, step: { thresholdRate: 5000, rate: 0, on: 'all_work' } } }), 'retainage.materialsRate'],
    ['a step upwards', one({}, { retainage: { ...rates(500), step: { thresholdRate: 5000, rate: 600, on: 'all_work' } } }), 'retainage.step.rate'],
    ['a threshold over 100 %', one({}, { retainage: { ...rates(500), step: { thresholdRate: 10_001, rate: 0, on: 'all_work' } } }), 'retainage.step.thresholdRate'],
    ['a cap over 100 %', one({}, { retainage: { ...rates(500), capRate: 10_001 } }), 'retainage.capRate'],
    ['a negative reserve', one({}, { retainage: { ...rates(500), reserveRate: -1 } }), 'retainage.reserveRate'],
    ['a negative punch list', one({}, { release: { at: 'substantial_completion', punchListCents: -1, multipleRate: 15_000 } }), 'release.punchListCents'],
    ['a negative deposit', one({}, { deposit: { depositCents: -1, use: 'first' } }), 'deposit.depositCents'],
    ['more deposit used than there is', one({}, { before: { ...firstState, depositUsedCents: 1 } }), 'before.depositUsedCents'],
    ['part of a milestone sum', one({ workCents: 500 }, { style: 'milestone_sums' }), 'lines.0.workCents'],
    ['a credit that grows', one({ scheduledCents: -1_000, workCents: -1_001 }), 'lines.0.workCents'],
    ['materials on a credit', one({ scheduledCents: -1_000, onHandCents: 1 }), 'lines.0.onHandCents'],
    ['an objection without a reason', () => applyObjections([line({ id: 'a', workCents: 5 })], [{ lineId: 'a', cents: 1, reason: ' ' }]), 'objections.0.reason'],
    ['an objection to another line', () => applyObjections([line({ id: 'a' })], [{ lineId: 'b', cents: 1, reason: 'x' }]), 'objections.0.lineId'],
    ['an objection beyond the draw', () => applyObjections([line({ id: 'a', workCents: 5, approvedWorkCents: 3 })], [{ lineId: 'a', cents: 3, reason: 'x' }]), 'objections.0.cents'],
    ['two objections to a line', () => applyObjections([line({ id: 'a', workCents: 5 })], [{ lineId: 'a', cents: 1, reason: 'x' }, { lineId: 'a', cents: 1, reason: 'x' }]), 'objections.1.lineId'],
    ['more moved than is on hand', () => moveOnHandToWork(line({ id: 'a', onHandCents: 1 }), 2), 'amount'],
    ['a percentage over 100', () => workFromPercent(100, 10_001), 'workRate'],
    ['a contract of no days', () => draftDraw({ style: 'percent_complete', lines: [], elapsedDays: 0, contractDays: 0 }), 'contractDays'],
    ['negative elapsed days', () => draftDraw({ style: 'percent_complete', lines: [], elapsedDays: -1, contractDays: 1 }), 'elapsedDays'],
    ['a negative dispute', () => withholdingLimit(-1, 15_000), 'disputedCents'],
  ];
  it.each(fails)('refuses %s and names the field', (_, run, field) => {
    expect(run).toThrow(InvalidInput);
    expect(run).toThrow(expect.objectContaining({ field }) as Error);
  });
});
