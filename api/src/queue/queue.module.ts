import { Global, Module } from '@nestjs/common';
import { QueueRepository } from './queue.repository.ts';

@Global()
@Module({ providers: [QueueRepository], exports: [QueueRepository] })
export class QueueModule {}
