import { computeDraw, firstState, type DrawInput } from '@tallypole/shared/draw';
import { byTurns, note, timed } from './rows.ts';

const RUNS = 400;

/** A draw of so many lines, some with materials on hand. */
const drawOf = (count: number): DrawInput => ({
  style: 'percent_complete',
  contractSumAsSignedCents: count * 100_000,
  changesApprovedCents: 0,
  lines: Array.from({ length: count }, (_, i) => ({ id: `line-${i}`, description: `Line ${i} of the schedule`, scheduledCents: 100_000, workCents: (i * 7_919) % 90_000, onHandCents: i % 5 === 0 ? 5_000 : 0, approvedWorkCents: 0, approvedOnHandCents: 0 })),
  retainage: { workRate: 500, materialsRate: 500 },
  release: { at: 'none' },
  deposit: { depositCents: 2_000_000, use: 'proportional' },
  withheldCents: 0,
  before: firstState,
  throughOn: '2026-11-30',
  isFinal: false,
});

const many = (work: () => unknown, runs = RUNS) => () => timed(() => {
  for (let run = 0; run < runs; run += 1) work();
});

it('a draw of 500 lines, against JSON; and ten thousand lines', async () => {
  const input = drawOf(500);
  const json = many(() => JSON.parse(JSON.stringify(input)) as unknown);
  const plain = many(() => computeDraw(input));
  const withSteps = many(() => computeDraw(input, { steps: true }));
  for (const warm of [json, plain, withSteps]) await warm();
  for (const [what, work, most] of [['a draw of 500 lines', plain, 3], ['a draw of 500 lines with its arithmetic', withSteps, 10]] as const) {
    const [ours, theirs] = await byTurns(5, work, json);
    note({ what, against: 'JSON.parse and JSON.stringify of its input', ratio: ours / theirs, target: `≤ ${most}`, met: ours / theirs <= most, seen: `${(ours / RUNS).toFixed(3)} and ${(theirs / RUNS).toFixed(3)} ms` });
  }
  const long = drawOf(10_000);
  const [tenThousand, thousand] = await byTurns(5, many(() => computeDraw(long), 10), many(() => computeDraw(drawOf(1_000)), 10));
  note({ what: 'a draw of 10,000 lines', against: 'one of 1,000 lines', ratio: tenThousand / thousand, target: 'about 10: it grows linearly', met: tenThousand / thousand < 20, seen: `${(tenThousand / 10).toFixed(1)} and ${(thousand / 10).toFixed(1)} ms` });
  expect(computeDraw(input).summary.dueNowCents).toBeGreaterThan(0);
});
