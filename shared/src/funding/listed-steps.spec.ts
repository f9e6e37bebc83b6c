import { describe, expect, it } from 'vitest';
import { money } from '../arithmetic/index.ts';
import { fundableSteps, loanOpenSteps, receivedSteps } from './listed-steps.ts';

describe('figures of lists', () => {
  it('opens what the builder has of a payment', () => {
    const part = receivedSteps({ id: 'p', label: 'Draw 1', amountCents: 50_000, keptCents: 30_000, state: 'Refunded' });
    expect(part.result).toEqual(money(30_000));
    expect(part.inputs.map(({ label, result }) => [label, result])).toEqual([['Paid', money(50_000)], ['Not here', money(20_000)], ['State', { kind: 'text', text: 'Refunded' }]]);
  });

  it('adds up what can be funded today from what each draw still asks', () => {
    const draws = [{ drawId: 'a', label: 'Draw 1, Elm', loanCents: 700, sentCents: 200 }, { drawId: 'b', label: 'Draw 4, Oak', loanCents: 90, sentCents: 0 }];
    expect(loanOpenSteps(draws[0]!).result).toEqual(money(500));
    const all = fundableSteps(draws);
    expect([all.result, all.inputs.map(({ result }) => result)]).toEqual([money(590), [money(500), money(90)]]);
    expect(fundableSteps([]).result).toEqual(money(0));
  });
});
