import { Module } from '@nestjs/common';
import { AuthModule } from '../auth/auth.module.ts';
import { BookkeepingModule } from '../payments/bookkeeping.module.ts';
import { DecisionsController } from './decisions.controller.ts';
import { DecisionsRepository } from './decisions.repository.ts';
import { DecisionsService } from './decisions.service.ts';
import { DrawActs } from './draw-acts.ts';
import { DrawFactsRepository } from './draw-facts.repository.ts';
import { DrawMails } from './draw-mails.ts';
import { DrawsController } from './draws.controller.ts';
import { DrawsRepository } from './draws.repository.ts';
import { DrawsService } from './draws.service.ts';

@Module({
  imports: [AuthModule, BookkeepingModule],
  controllers: [DrawsController, DecisionsController],
  providers: [DrawsService, DecisionsService, DrawActs, DrawMails, DrawsRepository, DrawFactsRepository, DecisionsRepository],
  exports: [DrawsService, DrawActs, DrawMails, DrawsRepository, DrawFactsRepository],
})
export class DrawsModule {}
