import type { INestApplicationContext } from '@nestjs/common';
import type { TaskList } from 'graphile-worker';
import { z } from 'zod';
import { CheckoutOpener } from './checkout-opener.ts';
import { PaymentSettlement } from './payment-settlement.ts';
import { PayoutAccounts } from './payout-accounts.ts';
import { StripeEventsService } from './stripe-events.service.ts';

const Firm = z.object({ firmId: z.uuid() });
const Attempt = Firm.extend({ attemptId: z.uuid() });
const OfPayment = Firm.extend({ paymentId: z.uuid() });
const Event = Firm.extend({ account: z.string(), eventId: z.string() });

/** The worker's jobs about payments; each may run twice and must then do nothing more. */
export const paymentTasks = (app: INestApplicationContext): TaskList => ({
  open_payout_account: (payload) => app.get(PayoutAccounts, { strict: false }).open(Firm.parse(payload).firmId),
  open_checkout: (payload) => {
    const { firmId, attemptId } = Attempt.parse(payload);
    return app.get(CheckoutOpener, { strict: false }).open(firmId, attemptId);
  },
  close_checkout: (payload) => {
    const { firmId, paymentId } = OfPayment.parse(payload);
    return app.get(CheckoutOpener, { strict: false }).close(firmId, paymentId);
  },
  check_payment: (payload) => {
    const { firmId, paymentId } = OfPayment.parse(payload);
    return app.get(PaymentSettlement, { strict: false }).check(firmId, paymentId);
  },
  handle_stripe_event: (payload) => {
    const { firmId, account, eventId } = Event.parse(payload);
    return app.get(StripeEventsService, { strict: false }).handle(firmId, account, eventId);
  },
  sweep_payments: () => app.get(PayoutAccounts, { strict: false }).sweepAll(),
  sweep_firm_payments: (payload) => app.get(PayoutAccounts, { strict: false }).sweep(Firm.parse(payload).firmId),
});
