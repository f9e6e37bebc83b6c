import { Global, Module } from '@nestjs/common';
import { NoticeRepository } from './notice.repository.ts';

@Global()
@Module({ providers: [NoticeRepository], exports: [NoticeRepository] })
export class NoticesModule {}
