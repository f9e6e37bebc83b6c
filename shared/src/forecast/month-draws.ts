import { computeDraw, firstState, type ComputedDraw, type DrawInput, type DrawLine, type RetainageRelease } from '../draw/index.ts';
import { minus, sum, type Cents } from '../money/index.ts';
import { lastDay, later } from './months.ts';
import type { Part } from './parts.ts';
import type { CashAheadInput, Month } from './types.ts';

/** A month's parts as one draw. */
export interface MonthDraw {
  month: Month;
  parts: readonly Part[];
  computed: ComputedDraw;
  /** Billed less retainage on every line, to date, in the order of the lines. */
  netToDate: readonly Cents[];
}

/**
 * Each month in which something falls due is computed as a draw, by the draw's own rules, on what the month before it left behind: so
 * retainage (rates, step, cap, reserve), deposit and credits are to the cent what the draws will show. The last one is the final draw.
 * Throws InvalidInput.
 */
export function monthDraws(input: CashAheadInput, months: readonly Month[], parts: readonly Part[]): { draws: MonthDraw[]; netBefore: readonly Cents[] } {
  const lines = input.lines.map((line): DrawLine => ({ ...line, approvedWorkCents: 0, approvedOnHandCents: 0 }));
  const start = drawOf(input, [...lines], 'none', input.asOf);
  // a credit signed after the work was billed leaves more billed than the contract sum, until the next draw gives it
  const billed = sum(lines.map((line) => sum([line.workCents, line.onHandCents])));
  const netBefore = netOf(computeDraw({ ...start, contractSumAsSignedCents: Math.max(start.contractSumAsSignedCents, billed) }, { steps: false }));
  const byMonth = new Map(months.map((month): [Month, Part[]] => [month, []]));
  for (const part of parts) byMonth.get(part.month)?.push(part);
  let before = input.before;
  const draws = months.map((month, i): MonthDraw => {
    const own = byMonth.get(month) ?? [];
    for (const { line, cents } of own) {
      const billed = lines[line];
      // what is stored for a line is built in when more of it is billed
      if (billed) lines[line] = { ...billed, workCents: sum([billed.workCents, billed.onHandCents, cents]), onHandCents: 0 };
    }
    const released = releaseIn(input, month);
    const isFinal = i === months.length - 1;
    const throughOn = later(lastDay(month), before.throughOn ?? '');
    const withheldCents = month < input.release.finalMonth ? before.withheldCents : 0;
    const computed = computeDraw({ ...drawOf(input, [...lines], released, throughOn), before, withheldCents, isFinal });
    before = computed.after;
    return { month, parts: own, computed, netToDate: netOf(computed) };
  });
  return { draws, netBefore };
}

const netOf = ({ lines }: ComputedDraw): Cents[] => lines.map(({ billedCents, retainageCents }) => minus(billedCents, retainageCents));

function releaseIn({ release: { substantial, finalMonth } }: CashAheadInput, month: Month): RetainageRelease | 'none' {
  if (month >= finalMonth) return { at: 'final' };
  return substantial && month >= substantial.month ? { at: 'substantial_completion', keepRate: substantial.keepRate } : 'none';
}

function drawOf({ retainage, deposit }: CashAheadInput, lines: DrawLine[], release: RetainageRelease | 'none', throughOn: string): DrawInput {
  return {
    // a milestone's sum falls due whole, everything else alike; lines billed evenly have parts on such a job too
    style: 'percent_complete',
    contractSumAsSignedCents: sum(lines.map(({ scheduledCents }) => scheduledCents)),
    changesApprovedCents: 0,
    lines,
    retainage,
    release: release === 'none' ? { at: 'none' } : release,
    deposit,
    withheldCents: 0,
    before: firstState,
    throughOn,
    isFinal: false,
    reserveOver: release !== 'none' && release.at === 'final',
  };
}
