import { Global, Module } from '@nestjs/common';
import { RecordRepository } from './record.repository.ts';

@Global()
@Module({ providers: [RecordRepository], exports: [RecordRepository] })
export class RecordModule {}
