import { Global, Module } from '@nestjs/common';
import { StorageModule } from '../files/files.module.ts';
import { DocumentsController } from './documents.controller.ts';
import { DocumentsRepository } from './documents.repository.ts';
import { LetterheadRepository } from './letterhead.repository.ts';

/** Papers, for web and worker alike; the web process serves them as well. */
@Global()
@Module({ providers: [DocumentsRepository, LetterheadRepository], exports: [DocumentsRepository, LetterheadRepository] })
export class PapersModule {}

@Module({ imports: [StorageModule, PapersModule], controllers: [DocumentsController] })
export class DocumentsModule {}
