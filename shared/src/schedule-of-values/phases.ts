import { given, money, step, type Step } from '../arithmetic/index.ts';
import { sum, type Cents } from '../money/index.ts';

interface PhaseLine {
  id: string;
  number: string;
  phase: string;
  description: string;
  scheduledCents: Cents;
}

export interface Phase<L extends PhaseLine> {
  name: string;
  lines: L[];
  sum: Step;
}

/** The lines by phase, in the order of the schedule, each with the arithmetic of its sum; a phase that comes again is one phase. */
export function phasesOf<L extends PhaseLine>(lines: readonly L[]): Phase<L>[] {
  const byName = new Map<string, L[]>();
  for (const line of lines) byName.set(line.phase, [...(byName.get(line.phase) ?? []), line]);
  return [...byName].map(([name, own]) => ({ name, lines: own, sum: sumOf(name, 'sum of its lines', own.map(lineValue)) }));
}

/** The whole schedule as the sum of its phases. */
export const scheduleSum = (phases: readonly Phase<PhaseLine>[]): Step => sumOf('Schedule of values', 'sum of its phases', phases.map((phase) => phase.sum));

/** The value of one line, as it was imported or agreed in a change. */
export const lineValue = ({ id, number, description, scheduledCents }: PhaseLine): Step =>
  given(number === '' ? description : `${number} ${description}`, money(scheduledCents), { record: 'line', id, label: description });

function sumOf(label: string, rule: string, inputs: readonly Step[]): Step {
  const amounts = inputs.map(({ result }) => (result.kind === 'money' ? result.cents : 0));
  return step(label, rule, money(sum(amounts)), inputs);
}
