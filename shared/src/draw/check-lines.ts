import { must } from '../arithmetic/index.ts';
import { dayNumber } from '../due/index.ts';
import { cents, sum, type Cents } from '../money/index.ts';
import type { DrawInput, DrawLine } from './types.ts';

const MOST_LINES = 10_000;

/** What must hold before anything is computed. Throws InvalidInput naming the line's field. */
export function checkDraw(input: DrawInput, contractSumTodayCents: Cents): void {
  const { lines, style, before, throughOn } = input;
  must(contractSumTodayCents >= 0, 'contractSumAsSignedCents', contractSumTodayCents, 'must not fall below zero with its changes');
  must(lines.length <= MOST_LINES, 'lines', lines, `must be at most ${MOST_LINES} lines`);
  dayNumber(throughOn, 'throughOn');
  must(before.throughOn === null || throughOn >= before.throughOn, 'throughOn', throughOn, 'must not end before the last draw');
  must(cents(input.withheldCents, 'withheldCents') >= 0, 'withheldCents', input.withheldCents, 'must not be negative');
  must(cents(before.creditCents, 'before.creditCents') >= 0, 'before.creditCents', before.creditCents, 'must not be negative');
  const ids = new Set<string>();
  lines.forEach((line, i) => {
    const field = `lines.${i}`;
    must(!ids.has(line.id), `${field}.id`, line.id, 'must be named once');
    ids.add(line.id);
    checkLine(line, field, style);
  });
  const billed = sum(lines.map((line) => sum([line.workCents, line.onHandCents])));
  must(billed <= contractSumTodayCents, 'lines', billed, 'must not bill more than the contract sum today');
}

function checkLine(line: DrawLine, field: string, style: DrawInput['style']): void {
  for (const name of ['scheduledCents', 'workCents', 'onHandCents', 'approvedWorkCents', 'approvedOnHandCents'] as const) cents(line[name], `${field}.${name}`);
  must(line.onHandCents >= 0, `${field}.onHandCents`, line.onHandCents, 'must not be negative');
  const { scheduledCents, workCents, onHandCents } = line;
  if (scheduledCents < 0) {
    // a deducting change's line: a credit that is given as work goes on, never more than itself
    must(workCents <= 0 && workCents >= scheduledCents, `${field}.workCents`, workCents, 'must lie between the credit and zero');
    must(onHandCents === 0, `${field}.onHandCents`, onHandCents, 'must be zero on a credit');
  } else {
    must(workCents >= 0, `${field}.workCents`, workCents, 'must not be negative');
    must(line.correction === true || workCents >= line.approvedWorkCents, `${field}.workCents`, workCents, 'must not be less than was approved before, unless it is a correction');
    must(style === 'cost_plus' || sum([workCents, onHandCents]) <= scheduledCents, `${field}.workCents`, workCents, 'must not go past the line\'s scheduled value');
  }
  must(style !== 'milestone_sums' || workCents === 0 || workCents === scheduledCents, `${field}.workCents`, workCents, 'must be nothing or the whole sum of the milestone');
}
