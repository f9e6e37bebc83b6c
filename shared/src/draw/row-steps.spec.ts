import fc from 'fast-check';
import { expect, it } from 'vitest';
import { lineSteps, rowSteps } from './index.ts';

const cents = fc.integer({ min: 0, max: 9_000_000 });

it('a line asks for what is billed to date less what was billed before', () => {
  expect(lineSteps({ id: 'a', description: 'Joists', scheduledCents: 500_000, workCents: 175_000, onHandCents: 42_000, billedBeforeCents: 100_000, billedRate: 4_340 }).result).toEqual({ kind: 'money', cents: 117_000 });
});

it('what is due, paid and open of a draw adds up from both sides, whatever they are', () => {
  fc.assert(fc.property(cents, cents, cents, cents, cents, cents, (a, b, c, d, e, f) => {
    const { due, paid, open } = rowSteps({ id: 'd', number: 1, homeownerCents: a, loanCents: b, paidHomeownerCents: c, paidLoanCents: d, openHomeownerCents: e, openLoanCents: f });
    expect([due, paid, open].map(({ result }) => result)).toEqual([a + b, c + d, e + f].map((sum) => ({ kind: 'money', cents: sum })));
    for (const { inputs } of [due, paid, open]) expect(inputs.every(({ origin }) => origin?.record === 'draw')).toBe(true);
  }));
});
