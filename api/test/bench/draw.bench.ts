import { fork } from 'node:child_process';
import path from 'node:path';
import { note } from './rows.ts';

type Times = Record<'json' | 'plain' | 'withSteps' | 'thousand' | 'tenThousand', number>;

it('a draw of 500 lines, against JSON; and ten thousand lines', async () => {
  const child = fork(path.join(import.meta.dirname, 'draw-times.mjs'), { execArgv: [], env: { PATH: process.env['PATH'] } });
  const { json, plain, withSteps, thousand, tenThousand } = await new Promise<Times>((done, fail) => child.once('message', (times) => done(times as Times)).once('error', fail));
  for (const [what, took, most] of [['a draw of 500 lines', plain, 3], ['a draw of 500 lines with its arithmetic', withSteps, 10]] as const) {
    note({ what, against: 'JSON.parse and JSON.stringify of its input', ratio: took / json, target: `≤ ${most}`, met: took / json <= most, seen: `${took.toFixed(2)} and ${json.toFixed(2)} ms` });
  }
  note({ what: 'a draw of 10,000 lines', against: 'one of 1,000 lines', ratio: tenThousand / thousand, target: 'about 10: it grows linearly', met: tenThousand / thousand < 20, seen: `${tenThousand.toFixed(1)} and ${thousand.toFixed(1)} ms` });
  expect(plain).toBeGreaterThan(0);
});
