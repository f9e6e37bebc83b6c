import { Module } from '@nestjs/common';
import { BookkeepingModule } from './bookkeeping.module.ts';
import { CheckoutOpener } from './checkout-opener.ts';
import { PaymentSettlement } from './payment-settlement.ts';
import { PayoutAccounts } from './payout-accounts.ts';
import { SettlementRepository } from './settlement.repository.ts';
import { StripeEventsService } from './stripe-events.service.ts';

/** The worker's part of payments: everything that talks to Stripe and writes what it says. */
@Module({ imports: [BookkeepingModule], providers: [CheckoutOpener, PaymentSettlement, PayoutAccounts, SettlementRepository, StripeEventsService] })
export class SettlementModule {}
