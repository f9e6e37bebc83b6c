import { appendFileSync } from 'node:fs';

export interface Row {
  what: string;
  against: string;
  /** What was measured over what it is measured against. */
  ratio: number;
  target: string;
  /** Whether the target is met. */
  met: boolean;
  /** Figures behind the ratio, for the reader. */
  seen: string;
}

/** Notes a row for the table that is printed at the end. */
export function note(row: Row): void {
  const file = process.env['BENCH_ROWS'];
  if (!file) throw new Error('BENCH_ROWS is not set; the reporter sets it.');
  appendFileSync(file, `${JSON.stringify(row)}\n`);
}

export const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? Number.NaN;

/** Runs two measurements by turns, so that a noisy minute meets both, and gives the median of each. */
export async function byTurns(rounds: number, first: () => Promise<number>, second: () => Promise<number>): Promise<[number, number]> {
  const [a, b]: [number[], number[]] = [[], []];
  for (let round = 0; round < rounds; round += 1) {
    a.push(await first());
    b.push(await second());
  }
  return [median(a), median(b)];
}

/** Milliseconds of one run. */
export async function timed(work: () => unknown): Promise<number> {
  const before = performance.now();
  await work();
  return performance.now() - before;
}
