import { Module } from '@nestjs/common';
import { AttemptsRepository } from './attempts.repository.ts';
import { Bookkeeper } from './bookkeeper.ts';
import { PaymentMails } from './payment-mails.ts';
import { PaymentsRepository } from './payments.repository.ts';
import { PayoutAccountsRepository } from './payout-accounts.repository.ts';
import { StripeClient } from './stripe-client.ts';
import { StripeEventsRepository } from './stripe-events.repository.ts';
import { ToTellRepository } from './to-tell.repository.ts';

const parts = [AttemptsRepository, Bookkeeper, PaymentMails, PaymentsRepository, PayoutAccountsRepository, StripeClient, StripeEventsRepository, ToTellRepository];

/** What web and worker share of payments. */
@Module({ providers: parts, exports: parts })
export class BookkeepingModule {}
