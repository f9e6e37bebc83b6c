import { date, given, money, quantity, step, type Step } from '../arithmetic/index.ts';
import { addCalendarDays, daysBetween, dueDate, type BusinessDate } from '../due/index.ts';
import { minus, split, sum, type Cents } from '../money/index.ts';
import { lastDay, later, monthOf, monthsFrom } from './months.ts';
import type { AheadLine, CashAheadInput, Month } from './types.ts';

/** A sum left to bill on one line, and the month in which it falls due. */
export interface Part {
  line: number;
  cents: Cents;
  month: Month;
  steps: Step;
}

type Terms = Pick<CashAheadInput, 'asOf' | 'reviewDays' | 'due'>;

/** When a sum billed on a day is due, no earlier than if it were billed today: its arithmetic with it. Throws InvalidInput. */
export function dueOf(terms: Terms, expectedOn: BusinessDate, label = 'Expected to be billed'): { month: Month; steps: Step } {
  const billedOn = later(expectedOn, terms.asOf);
  const startedOn = addCalendarDays(billedOn, terms.reviewDays);
  const { dueOn, steps } = dueDate(terms.due, startedOn);
  const start = step('Reviewed', 'the day it is billed + review days', date(startedOn), [given(label, date(billedOn)), given('Review', quantity(terms.reviewDays, 'calendar days'))]);
  return { month: monthOf(dueOn), steps: { ...steps, inputs: [start, ...steps.inputs] } };
}

/**
 * What is left to bill, line by line, with its months. A line that is billed evenly is split by the days that fall in each month (the
 * parts add up exactly) and billed at each month's end. Credits come early enough that no more than the contract sum is ever billed.
 * Throws InvalidInput.
 */
export function partsOf(input: CashAheadInput): Part[] {
  const parts = input.lines.flatMap((line, i) => linesParts(line, i, input));
  return creditsInTime(parts, input.lines, monthOf(input.asOf));
}

const billedOf = ({ workCents, onHandCents }: AheadLine): Cents => sum([workCents, onHandCents]);

function linesParts(line: AheadLine, place: number, terms: Terms): Part[] {
  const left = minus(line.scheduledCents, billedOf(line), `lines.${place}`);
  if (left === 0) return [];
  const { expected } = line;
  const part = (cents: Cents, on: BusinessDate, label?: string): Part => {
    const due = dueOf(terms, on, label);
    const rule = 'on' in expected ? 'left on the line, billed whole when its milestone is forecast to finish' : 'its share of what is left on the line, by days of the month';
    return { line: place, cents, month: due.month, steps: step(line.description, rule, money(cents), [given('Left on the line', money(left), { record: 'line', id: line.id, label: line.description }), due.steps]) };
  };
  if ('on' in expected) return [part(left, expected.on, expected.milestone && `${expected.milestone.name} finishes`)];
  const from = later(expected.from, terms.asOf);
  const to = later(expected.to, from);
  const ends = monthsFrom(monthOf(from), monthOf(to)).map((month) => (lastDay(month) < to ? lastDay(month) : to));
  const weights = ends.map((end, i) => daysBetween(i === 0 ? from : addCalendarDays(ends[i - 1] ?? from, 1), end) + 1);
  return split(left, weights).flatMap((cents, i) => (cents === 0 ? [] : [part(cents, ends[i] ?? to, 'End of the month’s share')]));
}

/** Billed to date never passes the contract sum: where it would, the credits still to come are given in that month. */
function creditsInTime(parts: readonly Part[], lines: readonly AheadLine[], thisMonth: Month): Part[] {
  const contractSum = sum(lines.map(({ scheduledCents }) => scheduledCents));
  const moved = parts.map((part) => ({ ...part }));
  let billed = sum(lines.map(billedOf));
  for (const month of [...new Set([thisMonth, ...parts.map((part) => part.month)])].sort()) {
    billed = sum([billed, ...moved.filter((part) => part.month === month).map(({ cents }) => cents)]);
    if (billed <= contractSum) continue;
    for (const part of moved) {
      if (part.cents >= 0 || part.month <= month) continue;
      part.steps = step(part.steps.label, 'given sooner: what is billed never passes the contract sum', money(part.cents), [part.steps]);
      part.month = month;
      billed = sum([billed, part.cents]);
    }
  }
  return moved;
}
