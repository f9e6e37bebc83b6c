// In a process of its own, since a test runner's module loading would slow down what is measured here.
import { computeDraw, firstState } from '@tallypole/shared/draw';

/** A draw of so many lines, some with materials on hand. @param {number} count */
const drawOf = (count) => ({
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

/** Milliseconds of one run, over many. @param {() => unknown} work @param {number} runs */
function time(work, runs) {
  const before = performance.now();
  for (let run = 0; run < runs; run += 1) work();
  return (performance.now() - before) / runs;
}

const median = (/** @type {number[]} */ values) => values.sort((a, b) => a - b)[values.length >> 1];
const [input, thousand, tenThousand] = [500, 1_000, 10_000].map(drawOf);
const works = {
  json: [() => JSON.parse(JSON.stringify(input)), 300],
  plain: [() => computeDraw(input, { steps: false }), 300],
  withSteps: [() => computeDraw(input, { steps: true }), 300],
  thousand: [() => computeDraw(thousand, { steps: false }), 100],
  tenThousand: [() => computeDraw(tenThousand, { steps: false }), 10],
};
const seen = Object.fromEntries(Object.keys(works).map((name) => [name, []]));
for (let round = 0; round < 8; round += 1) {
  for (const [name, [work, runs]] of Object.entries(works)) {
    const took = time(work, runs);
    // the first round warms up
    if (round > 0) seen[name].push(took);
  }
}
process.send(Object.fromEntries(Object.entries(seen).map(([name, values]) => [name, median(values)])));
