import { Body, Controller, Get, Inject, Param, Post, Query, Req, Res } from '@nestjs/common';
import { ApiBody, ApiConsumes, ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { z } from 'zod';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/photos';
import { answer } from '../common/answer.ts';
import { ApiQueryOf } from '../common/api-query.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { FILE_STORAGE, type FileStorage } from '../files/file-storage.ts';
import { sendStored } from '../files/send-stored.ts';
import { uploadBody } from '../files/upload-body.ts';
import { PhotosService } from './photos.service.ts';

// an unknown size is not found, like an unknown photo
const SizeName = z.string().max(60).meta({ enum: Object.keys(S.photoSizes) });
const Job = () => Param('jobId', { schema: Id });
const Photo = () => Param('photoId', { schema: Id });

@ApiTags('photos')
@Controller('jobs/:jobId')
export class PhotosController {
  constructor(
    private readonly photos: PhotosService,
    @Inject(FILE_STORAGE) private readonly storage: FileStorage,
  ) {}

  @Get('photos') @Route('photo.read', 'read') @ApiQueryOf(S.PhotoQuery) @ApiOkResponse({ standardSchema: S.PhotoList })
  list(@CurrentActor() actor: Actor, @Job() jobId: string, @Query({ schema: S.PhotoQuery }) query: S.PhotoQuery): Promise<S.PhotoList> {
    return this.photos.list(actor, jobId, query);
  }

  @Post('photos') @Route('photo.add', 'upload') @ApiConsumes('multipart/form-data') @ApiBody(uploadBody('id', 'milestoneId')) @ApiCreatedResponse({ standardSchema: S.Photo })
  async add(@CurrentActor() actor: Actor, @Job() jobId: string, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<S.Photo> {
    return answer(response, await this.photos.add(actor, jobId, request, response));
  }

  @Get('photos/:photoId') @Route('photo.read', 'read') @ApiOkResponse({ standardSchema: S.Photo })
  get(@CurrentActor() actor: Actor, @Job() jobId: string, @Photo() photoId: string): Promise<S.Photo> {
    return this.photos.photo(actor, jobId, photoId);
  }

  @Get('photos/:photoId/:size') @Route('photo.read', 'read') @ApiOkResponse({ description: 'The picture in this size, without its metadata.' })
  async picture(
    @CurrentActor() actor: Actor, @Job() jobId: string, @Photo() photoId: string,
    @Param('size', { schema: SizeName }) size: string, @Res() response: Response,
  ): Promise<void> {
    const { key, bytes } = await this.photos.size(actor, jobId, photoId, size);
    await sendStored(response, this.storage, { storageKey: key, mediaType: 'image/jpeg', bytes });
  }

  @Get('site') @Route('photo.place', 'read') @ApiOkResponse({ standardSchema: S.Site })
  site(@CurrentActor() actor: Actor, @Job() jobId: string): Promise<S.Site> {
    return this.photos.site(actor, jobId);
  }

  @Post('site') @Route('site.locate', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Site })
  async locate(
    @CurrentActor() actor: Actor, @Job() jobId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.SiteLocation }) body: S.SiteLocation, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Site> {
    return answer(response, await this.photos.locate(actor, jobId, body, key));
  }
}
