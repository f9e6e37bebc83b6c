import { Module } from '@nestjs/common';
import { ChangeReissueModule } from '../changes/changes.module.ts';
import { LoansController } from './loans.controller.ts';
import { LoansRepository } from './loans.repository.ts';
import { LoansService } from './loans.service.ts';

@Module({ imports: [ChangeReissueModule], controllers: [LoansController], providers: [LoansService, LoansRepository] })
export class LoansModule {}
