import { Module } from '@nestjs/common';
import { LoansController } from './loans.controller.ts';
import { LoansRepository } from './loans.repository.ts';
import { LoansService } from './loans.service.ts';

@Module({ controllers: [LoansController], providers: [LoansService, LoansRepository] })
export class LoansModule {}
