import { Global, Module } from '@nestjs/common';
import { LedgerRepository } from './ledger.repository.ts';

@Global()
@Module({ providers: [LedgerRepository], exports: [LedgerRepository] })
export class LedgerModule {}
