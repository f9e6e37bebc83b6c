import { describe, expect, it } from 'vitest';
import { money } from '../arithmetic/index.ts';
import { contractSumSteps, signedSteps } from './log-steps.ts';

describe('the change log', () => {
  it('adds up what is signed, credits included', () => {
    const signed = signedSteps([{ id: 'a', label: 'Change 1', chargedCents: 91_549 }, { id: 'b', label: 'Change 2A', chargedCents: -20_000 }]);
    expect([signed.result, signed.inputs.map(({ origin }) => origin?.id)]).toEqual([money(71_549), ['a', 'b']]);
  });

  it('makes the contract sum of what was signed first and what was signed since', () => {
    expect(contractSumSteps({ id: 'j', name: 'Elm', asSignedCents: 48_650_000, changesApprovedCents: -150_000 }).result).toEqual(money(48_500_000));
  });
});
