import { must } from '../arithmetic/index.ts';
import { basisPoints, cents, divideRounded, percentOf, sum, type BasisPoints, type Cents } from '../money/index.ts';
import type { ContractStyle, DrawLine } from './types.ts';

export type ProofState = 'upcoming' | 'under_way' | 'claimed' | 'proven';

export interface LineToDraft extends Omit<DrawLine, 'workCents' | 'onHandCents'> {
  milestone: { state: ProofState; inspectedRate: BasisPoints } | null;
}

export interface DraftInput {
  style: ContractStyle;
  lines: readonly LineToDraft[];
  /** How much of the contract time has gone by; general lines follow it. */
  elapsedDays: number;
  contractDays: number;
}

/**
 * What can be billed by the proof there is: lines of proven milestones whole, of milestones under way or claimed at the last inspected
 * percent, general lines by elapsed time; never less than was approved. By milestone sums only what is proven. Throws InvalidInput.
 */
export function draftDraw({ style, lines, elapsedDays, contractDays }: DraftInput): DrawLine[] {
  must(Number.isSafeInteger(contractDays) && contractDays > 0, 'contractDays', contractDays, 'must be at least one day');
  must(Number.isSafeInteger(elapsedDays) && elapsedDays >= 0, 'elapsedDays', elapsedDays, 'must not be negative');
  const elapsed = Math.min(elapsedDays, contractDays);
  return lines.map(({ milestone, ...line }, i) => {
    const proven = provenWork(line.scheduledCents, milestone, style, { elapsed, contractDays }, `lines.${i}`);
    const workCents = line.scheduledCents < 0 ? Math.min(proven, line.approvedWorkCents) : Math.max(proven, line.approvedWorkCents);
    const room = Math.max(0, line.scheduledCents - workCents);
    return { ...line, workCents, onHandCents: Math.min(line.approvedOnHandCents, room) };
  });
}

function provenWork(scheduled: Cents, milestone: LineToDraft['milestone'], style: ContractStyle, time: { elapsed: number; contractDays: number }, field: string): Cents {
  if (milestone === null) return style === 'milestone_sums' ? 0 : divideRounded(BigInt(scheduled) * BigInt(time.elapsed), BigInt(time.contractDays));
  if (milestone.state === 'proven') return scheduled;
  if (style === 'milestone_sums' || milestone.state === 'upcoming') return 0;
  return workFromPercent(scheduled, milestone.inspectedRate, `${field}.inspectedRate`);
}

/** Work in place from a percentage that was entered: round(scheduled value × percent). Throws InvalidInput. */
export function workFromPercent(scheduledCents: Cents, workRate: BasisPoints, field = 'workRate'): Cents {
  return percentOf(cents(scheduledCents, field), basisPoints(workRate, field));
}

/** Materials that are built in move from on hand to work in place. Throws InvalidInput where more is moved than is there. */
export function moveOnHandToWork(line: DrawLine, amount: Cents): DrawLine {
  must(cents(amount, 'amount') >= 0 && amount <= line.onHandCents, 'amount', amount, 'must be at most what is on hand');
  return { ...line, workCents: sum([line.workCents, amount]), onHandCents: sum([line.onHandCents, -amount]) };
}
