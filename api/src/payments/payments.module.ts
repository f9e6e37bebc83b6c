import { Module } from '@nestjs/common';
import { AuthModule } from '../auth/auth.module.ts';
import { BookkeepingModule } from './bookkeeping.module.ts';
import { PaymentsController } from './payments.controller.ts';
import { PaymentsService } from './payments.service.ts';
import { PayoutsController } from './payouts.controller.ts';
import { PayoutsService } from './payouts.service.ts';
import { WebhookController } from './webhook.controller.ts';

/** What the web process answers; the worker's part is SettlementModule. */
@Module({
  imports: [AuthModule, BookkeepingModule],
  controllers: [PaymentsController, PayoutsController, WebhookController],
  providers: [PaymentsService, PayoutsService],
})
export class PaymentsModule {}
