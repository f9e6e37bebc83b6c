import { Module } from '@nestjs/common';
import { DrawsModule } from '../draws/draws.module.ts';
import { BookkeepingModule } from '../payments/bookkeeping.module.ts';
import { LendingController } from './lending.controller.ts';
import { LendingRepository } from './lending.repository.ts';
import { LendingService } from './lending.service.ts';
import { ReviewsRepository } from './reviews.repository.ts';
import { ReviewsService } from './reviews.service.ts';

@Module({
  imports: [DrawsModule, BookkeepingModule],
  controllers: [LendingController],
  providers: [LendingService, LendingRepository, ReviewsService, ReviewsRepository],
})
export class LendingModule {}
