import { given, money, step, text, type Step } from '../arithmetic/index.ts';
import { minus, sum, type Cents } from '../money/index.ts';

export interface ReceivedFigures {
  id: string;
  /** What it was for, as the list says it. */
  label: string;
  amountCents: Cents;
  keptCents: Cents;
  /** What became of it, in words. */
  state: string;
}

/** What the builder has of a payment: all of it, less what has not arrived or went back. Throws InvalidInput. */
export function receivedSteps({ id, label, amountCents, keptCents, state }: ReceivedFigures): Step {
  return step('Received', 'paid − not here (not arrived yet, failed, or gone back)', money(keptCents), [
    given('Paid', money(amountCents), { record: 'payment', id, label }),
    given('Not here', money(minus(amountCents, keptCents))),
    given('State', text(state)),
  ]);
}

export interface LoanOpenFigures {
  drawId: string;
  /** "Draw 2, 22 Juniper Hill". */
  label: string;
  loanCents: Cents;
  sentCents: Cents;
}

/** What the loan is still asked for in a draw. Throws InvalidInput. */
export function loanOpenSteps({ drawId, label, loanCents, sentCents }: LoanOpenFigures): Step {
  return step(label, 'the loan’s part − sent', money(minus(loanCents, sentCents)), [given('The loan’s part', money(loanCents), { record: 'draw', id: drawId, label }), given('Sent', money(sentCents))]);
}

/** What can be sent today, over all draws that nothing keeps from it. Throws InvalidInput. */
export function fundableSteps(draws: readonly LoanOpenFigures[]): Step {
  return step('Can be funded today', 'sum of what these draws ask of the loan', money(sum(draws.map(({ loanCents, sentCents }) => minus(loanCents, sentCents)))), draws.map(loanOpenSteps));
}
