import type { DrawState, ReviewState } from '@tallypole/shared/schemas/draw-states';
import type { PaymentState } from '@tallypole/shared/schemas/payments';
import { StateTag, type Meaning } from './state-tag.tsx';

type Words<State extends string> = Readonly<Record<State, { words: string; meaning: Meaning }>>;

const DRAW: Words<DrawState> = {
  draft: { words: 'Draft', meaning: 'neutral' },
  submitted: { words: 'To approve', meaning: 'waits' },
  returned: { words: 'Came back', meaning: 'refused' },
  approved: { words: 'Approved', meaning: 'waits' },
  part_paid: { words: 'Paid in part', meaning: 'waits' },
  paid: { words: 'Paid', meaning: 'settled' },
  void: { words: 'Void', meaning: 'neutral' },
};

const REVIEW: Words<ReviewState> = {
  not_needed: { words: 'No loan in this draw', meaning: 'neutral' },
  ordered: { words: 'To inspect', meaning: 'waits' },
  inspected: { words: 'Inspected', meaning: 'waits' },
  allowed: { words: 'Allowed', meaning: 'waits' },
  funded: { words: 'Funded', meaning: 'settled' },
};

const PAYMENT: Words<PaymentState> = {
  started: { words: 'Started', meaning: 'neutral' },
  processing: { words: 'On its way', meaning: 'waits' },
  settled: { words: 'Settled', meaning: 'settled' },
  failed: { words: 'Failed', meaning: 'refused' },
  canceled: { words: 'Not paid', meaning: 'neutral' },
  refunded: { words: 'Refunded', meaning: 'neutral' },
  returned: { words: 'Returned', meaning: 'refused' },
  disputed: { words: 'Disputed', meaning: 'refused' },
};

export const DrawTag = ({ state }: { state: DrawState }) => <StateTag meaning={DRAW[state].meaning}>{DRAW[state].words}</StateTag>;
export const ReviewTag = ({ state }: { state: ReviewState }) => <StateTag meaning={REVIEW[state].meaning}>{`Lender: ${REVIEW[state].words.toLowerCase()}`}</StateTag>;
export const PaymentTag = ({ state }: { state: PaymentState }) => <StateTag meaning={PAYMENT[state].meaning}>{PAYMENT[state].words}</StateTag>;

/** The state of a payment in words, where a tag has no place. */
export const paymentStateWords = (state: PaymentState): string => PAYMENT[state].words;
