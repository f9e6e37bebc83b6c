import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { computed } from './testing/worked-examples/index.ts';

interface Published {
  id: string;
  source: string;
  expected: unknown;
}

const file = fileURLToPath(new URL('../../../shared/references/worked-examples.json', import.meta.url));
const published = existsSync(file) ? (JSON.parse(readFileSync(file, 'utf8')) as Published[]) : [];

/** Examples that fit no function of ours, and why. */
const noFunction: Record<string, string> = {
  'WE-A4': 'no table of federal rates is kept: the contract names its rate; eighths of a percent are no whole basis points either',
  'WE-F1': 'fees are what the processor reports with each payment; they are recorded, never computed',
  'WE-F2': 'the processor\'s own package checks signatures in the API; the stand-in that signs is tested against it with bad, stale and missing ones',
  'WE-G2': 'HMAC is Node\'s own, used by the API alone: a test here would test Node',
  'WE-G5': 'the record is a chain of entries, not a tree; only the hash of nothing is common to both (WE-G1)',
  'WE-I2': 'deadlines for rescinding a loan are the lender\'s; no calendar here works on Saturdays',
  'WE-J1': 'colors are measured in the portal, where its pages are checked for contrast',
};

describe.each(computed.map((example) => [example.id, example] as const))('%s', (_, { what, source, figures, compute }) => {
  it(`${what} (${source})`, async () => expect(await compute()).toEqual(figures));
});

describe.skipIf(published.length === 0)(`the list of worked examples${published.length === 0 ? ' (skipped: the folder of references is not beside this clone)' : ''}`, () => {
  const named = [...computed.map(({ id }) => id), ...Object.keys(noFunction)];

  it('has no example that is neither computed here nor left out for a reason, and none is named here that it lacks', () => {
    expect([...named].sort()).toEqual(published.map(({ id }) => id).sort());
    expect(new Set(named).size).toBe(named.length);
    expect(Object.values(noFunction).every((reason) => reason.length > 20)).toBe(true);
  });

  it.each(computed.map((example) => [example.id, example] as const))('holds the figures that %s is tested with', (id, { figures }) => {
    const text = JSON.stringify(published.find((example) => example.id === id)?.expected);
    expect(figures.filter((figure) => !text.includes(figure))).toEqual([]);
  });
});
