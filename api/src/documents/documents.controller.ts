import { Controller, Get, Inject, Param, Res } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import { Problem } from '../common/problem.ts';
import { CurrentActor, Route } from '../common/route.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { FILE_STORAGE, type FileStorage } from '../files/file-storage.ts';
import { sendStored } from '../files/send-stored.ts';
import { DocumentsRepository } from './documents.repository.ts';

@ApiTags('documents')
@Controller('jobs/:jobId/documents')
export class DocumentsController {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: DocumentsRepository,
    @Inject(FILE_STORAGE) private readonly storage: FileStorage,
  ) {}

  /** A paper as it was made and signed: the stored bytes, never made anew. */
  @Get(':documentId') @Route('document.read', 'read') @ApiOkResponse({ description: 'The PDF itself, as a download.' })
  async download(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Param('documentId', { schema: Id }) documentId: string,
    @Res() response: Response,
  ): Promise<void> {
    const document = await this.work.readJob(actor, jobId, 'document.read', (tx) => this.repository.find(tx, jobId, documentId));
    if (!document) throw new Problem('not_found');
    await sendStored(response, this.storage, { storageKey: document.storageKey, mediaType: 'application/pdf', bytes: document.bytes, downloadAs: document.name });
  }
}
