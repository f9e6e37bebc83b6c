import { Module } from '@nestjs/common';
import { FirmsController } from './firms.controller.ts';
import { FirmsRepository } from './firms.repository.ts';
import { FirmsService } from './firms.service.ts';

@Module({ controllers: [FirmsController], providers: [FirmsService, FirmsRepository] })
export class FirmsModule {}
