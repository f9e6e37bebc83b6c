import { Module } from '@nestjs/common';
import { DrawsModule } from '../draws/draws.module.ts';
import { BookkeepingModule } from '../payments/bookkeeping.module.ts';
import { AheadRepository } from './ahead.repository.ts';
import { MoneyController } from './money.controller.ts';
import { MoneyRepository } from './money.repository.ts';
import { MoneyService } from './money.service.ts';

@Module({ imports: [DrawsModule, BookkeepingModule], controllers: [MoneyController], providers: [MoneyService, MoneyRepository, AheadRepository] })
export class MoneyModule {}
