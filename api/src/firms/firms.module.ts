import { Module } from '@nestjs/common';
import { FirmsController } from './firms.controller.ts';
import { FirmsRepository } from './firms.repository.ts';
import { FirmsService } from './firms.service.ts';
import { PricingController } from './pricing.controller.ts';
import { PricingService } from './pricing.service.ts';

@Module({ controllers: [FirmsController, PricingController], providers: [FirmsService, PricingService, FirmsRepository] })
export class FirmsModule {}
