import { describe, expect, it } from '@jest/globals';
import fc from 'fast-check';
import type { PaymentState } from '@tallypole/shared/schemas/payments';
import { movesFor, type Held, type Move } from './settlement.ts';
import { failedRefundId, returnedId, wonDisputeId } from './payment-entries.ts';
import type { PaymentFacts, SessionFacts } from './stripe-facts.ts';

const SUM = 300_000;
const fresh: Held = { state: 'started', amountCents: SUM, keptCents: 0, feeCents: null, booked: [] };
const facts = (more: Partial<PaymentFacts>): PaymentFacts => ({
  intentId: 'pi_1', paymentId: null, status: 'processing', attempted: false, receivedCents: 0, feeCents: null, failure: null, failureCode: null, refunds: [], disputes: [], ...more,
});
const paid = (more: Partial<PaymentFacts> = {}) => facts({ status: 'succeeded', receivedCents: SUM, feeCents: 500, ...more });
const dispute = (outcome: 'open' | 'won' | 'lost') => ({ id: 'dp_1', amountCents: SUM, outcome, withdrawn: true, feesCents: [1_500], reason: 'debit_not_authorized' });

/** Writes moves down as the worker does. */
function hold(held: Held, moves: readonly Move[]): Held {
  const booked = moves.flatMap((move) => {
    if (move.book === 'refund' || move.book === 'dispute') return [move.id];
    if (move.book === 'failed_refund') return [failedRefundId(move.id)];
    if (move.book === 'won') return [wonDisputeId(move.id)];
    return move.book === 'return' ? [returnedId(move.id)] : [];
  });
  const fee = moves.map((move) => (move.book === 'payment' || move.book === 'fee' ? move.feeCents : null)).find((cents) => cents !== null);
  const last = moves.at(-1);
  return { ...held, state: last?.state ?? held.state, keptCents: last?.keptCents ?? held.keptCents, feeCents: fee ?? held.feeCents, booked: [...held.booked, ...booked] };
}

interface Snapshot {
  session: Pick<SessionFacts, 'status'>;
  facts: PaymentFacts | null;
}
const complete = { status: 'complete' } as const;
const seen = (found: PaymentFacts): Snapshot => ({ session: complete, facts: found });

/** What Stripe says in the course of a payment's life, in order. */
const LIVES: readonly { ends: PaymentState; kept: number; life: readonly Snapshot[] }[] = [
  { ends: 'settled', kept: SUM, life: [{ session: { status: 'open' }, facts: null }, seen(facts({})), seen(paid({ feeCents: null })), seen(paid())] },
  { ends: 'failed', kept: 0, life: [seen(facts({})), seen(facts({ status: 'unpaid', attempted: true, failure: 'No funds.' }))] },
  { ends: 'canceled', kept: 0, life: [{ session: { status: 'open' }, facts: null }, { session: { status: 'expired' }, facts: null }] },
  { ends: 'returned', kept: 0, life: [seen(facts({})), seen(paid()), seen(paid({ disputes: [dispute('lost')] }))] },
  { ends: 'settled', kept: SUM, life: [seen(paid()), seen(paid({ disputes: [dispute('open')] })), seen(paid({ disputes: [dispute('won')] }))] },
  {
    ends: 'settled',
    kept: 100_000,
    life: [
      seen(paid({ refunds: [{ id: 're_1', amountCents: 200_000, failed: false }] })),
      seen(paid({ refunds: [{ id: 're_1', amountCents: 200_000, failed: false }, { id: 're_2', amountCents: 100_000, failed: false }] })),
      seen(paid({ refunds: [{ id: 're_1', amountCents: 200_000, failed: false }, { id: 're_2', amountCents: 100_000, failed: true }] })),
    ],
  },
];

describe('what is still to be written of a payment', () => {
  it.each(LIVES)('ends as $ends whichever of the snapshots come, how often, as long as the last one comes', ({ ends, kept, life }) => {
    fc.assert(
      fc.property(fc.array(fc.nat(life.length - 1), { maxLength: 12 }), (order) => {
        // what is read can only be as old as the read: snapshots never go back, but any may be missed or read again
        const order2 = [...order].sort((a, b) => a - b);
        let held = fresh;
        const booked: string[] = [];
        for (const i of [...order2, life.length - 1, life.length - 1]) {
          const snapshot = life[i];
          if (!snapshot) continue;
          const moves = movesFor(held, snapshot.session, snapshot.facts);
          booked.push(...moves.filter(({ book }) => book !== 'nothing').map((move) => `${move.book} ${'id' in move ? move.id : ''}`));
          held = hold(held, moves);
        }
        expect([held.state, held.keptCents]).toEqual([ends, kept]);
        expect(new Set(booked).size).toBe(booked.length);
      }),
    );
  });

  it('leaves a settled payment alone when an older answer comes late', () => {
    const settled = hold(fresh, movesFor(fresh, complete, paid()));
    expect(movesFor(settled, complete, facts({}))).toEqual([]);
    expect(movesFor(settled, complete, facts({ status: 'unpaid', attempted: true }))).toEqual([]);
    expect(movesFor(settled, complete, paid())).toEqual([]);
  });

  it('waits while the payment page is open, and says so when Stripe received another sum', () => {
    expect(movesFor(fresh, { status: 'open' }, facts({ status: 'unpaid', attempted: true }))).toEqual([]);
    expect(() => movesFor(fresh, complete, paid({ receivedCents: SUM - 1 }))).toThrow(/received 299999/);
  });
});
