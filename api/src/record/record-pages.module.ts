import { Module } from '@nestjs/common';
import { RecordController } from './record.controller.ts';
import { RecordPagesRepository } from './record-pages.repository.ts';
import { RecordPagesService } from './record-pages.service.ts';

/** What people read of the record; the worker writes only. */
@Module({ controllers: [RecordController], providers: [RecordPagesService, RecordPagesRepository] })
export class RecordPagesModule {}
