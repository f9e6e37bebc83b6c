import { must } from '../arithmetic/index.ts';
import { cents, minus, sum, type Cents } from '../money/index.ts';
import type { DrawLine } from './types.ts';

export interface Objection {
  lineId: string;
  /** What is not approved of this draw's part of the line. */
  cents: Cents;
  reason: string;
}

/**
 * The lines as approved: an objection lowers this draw's part of its line, work first, then materials; the difference stays left to bill.
 * Throws InvalidInput for a line that isn't there, one named twice, or more than this draw asks for.
 */
export function applyObjections(lines: readonly DrawLine[], objections: readonly Objection[]): DrawLine[] {
  const byLine = new Map<string, Objection>();
  objections.forEach((objection, i) => {
    must(objection.reason.trim().length > 0, `objections.${i}.reason`, objection.reason, 'must say why');
    must(!byLine.has(objection.lineId), `objections.${i}.lineId`, objection.lineId, 'must be named once');
    must(lines.some((line) => line.id === objection.lineId), `objections.${i}.lineId`, objection.lineId, 'must be a line of this draw');
    byLine.set(objection.lineId, objection);
  });
  return lines.map((line) => {
    const objection = byLine.get(line.id);
    if (!objection) return line;
    const work = minus(line.workCents, line.approvedWorkCents);
    const onHand = minus(line.onHandCents, line.approvedOnHandCents);
    const asked = sum([work, onHand]);
    must(cents(objection.cents, 'objections.cents') > 0 && objection.cents <= asked, `objections.${objections.indexOf(objection)}.cents`, objection.cents, 'must be more than zero and at most what this draw asks for on the line');
    const fromWork = Math.min(objection.cents, Math.max(0, work));
    return { ...line, workCents: minus(line.workCents, fromWork), onHandCents: minus(line.onHandCents, minus(objection.cents, fromWork)) };
  });
}
