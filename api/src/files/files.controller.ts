import { Controller, Get, Inject, Param, Post, Req, Res } from '@nestjs/common';
import { ApiBody, ApiConsumes, ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/files';
import { answer } from '../common/answer.ts';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { FILE_STORAGE, type FileStorage } from './file-storage.ts';
import { FilesService } from './files.service.ts';
import { sendStored } from './send-stored.ts';
import { uploadBody } from './upload-body.ts';

@ApiTags('files')
@Controller('jobs/:jobId/files')
export class FilesController {
  constructor(
    private readonly files: FilesService,
    @Inject(FILE_STORAGE) private readonly storage: FileStorage,
  ) {}

  @Post() @Route('file.add', 'upload') @ApiConsumes('multipart/form-data') @ApiBody(uploadBody('id', 'purpose')) @ApiCreatedResponse({ standardSchema: S.StoredFile })
  async add(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Req() request: Request,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.StoredFile> {
    return answer(response, await this.files.add(actor, jobId, request, response));
  }

  @Get(':fileId') @Route('file.read', 'read') @ApiOkResponse({ description: 'The file itself, as a download.' })
  async download(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Param('fileId', { schema: Id }) fileId: string,
    @Res() response: Response,
  ): Promise<void> {
    const { storageKey, mediaType, bytes, name } = await this.files.find(actor, jobId, fileId);
    await sendStored(response, this.storage, { storageKey, mediaType, bytes, downloadAs: name });
  }
}
