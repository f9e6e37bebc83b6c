import { Body, Controller, Get, HttpCode, Inject, Param, Post, Req, Res, UseGuards } from '@nestjs/common';
import { ApiAcceptedResponse, ApiBody, ApiConsumes, ApiCreatedResponse, ApiNoContentResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Request, Response } from 'express';
import { z } from 'zod';
import { CodeSent } from '@tallypole/shared/schemas/auth';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/guest-links';
import { Photo, photoSizes } from '@tallypole/shared/schemas/photos';
import { answer } from '../common/answer.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { ApiIdempotencyKey, IdempotencyKey, Route } from '../common/route.ts';
import { FILE_STORAGE, type FileStorage } from '../files/file-storage.ts';
import { sendStored } from '../files/send-stored.ts';
import { uploadBody } from '../files/upload-body.ts';
import { GuestActsService } from './guest-acts.service.ts';
import { GuestCookie } from './guest-cookie.ts';
import { GuestGuard, Visit } from './guest.guard.ts';
import { GuestService } from './guest.service.ts';

// an unknown size is not found, like an unknown photo
const SizeName = z.string().max(60).meta({ enum: Object.keys(photoSizes) });

/** What somebody does who came by a link. Only the first route takes the link's token; the others go by the cookie of the visit. */
@ApiTags('guest')
@Controller('guest')
export class GuestController {
  private readonly cookie: GuestCookie;

  constructor(
    private readonly guests: GuestService,
    private readonly acts: GuestActsService,
    @Inject(FILE_STORAGE) private readonly storage: FileStorage,
    @Inject(CONFIGURATION) configuration: Configuration,
  ) {
    this.cookie = new GuestCookie(configuration.PUBLIC_URL);
  }

  @Post('visits') @Route('public', 'sign_in') @ApiCreatedResponse({ standardSchema: S.GuestDoor })
  async open(@Body({ schema: S.OpenGuestLink }) body: S.OpenGuestLink, @Res({ passthrough: true }) response: Response): Promise<S.GuestDoor> {
    const { door, token } = await this.guests.open(body.token);
    this.cookie.set(response, token);
    return door;
  }

  @Get('door') @UseGuards(GuestGuard) @Route('guest', 'read') @ApiOkResponse({ standardSchema: S.GuestDoor })
  door(@Visit() visit: Buffer): Promise<S.GuestDoor> {
    return this.guests.door(visit);
  }

  @Post('codes') @HttpCode(202) @UseGuards(GuestGuard) @Route('guest', 'code') @ApiAcceptedResponse({ standardSchema: CodeSent })
  askForCode(@Visit() visit: Buffer): Promise<CodeSent> {
    return this.guests.askForCode(visit);
  }

  @Post('confirm') @HttpCode(200) @UseGuards(GuestGuard) @Route('guest', 'sign_in') @ApiOkResponse({ standardSchema: S.GuestDoor })
  async confirm(@Visit() visit: Buffer, @Body({ schema: S.GuestCode }) body: S.GuestCode, @Res({ passthrough: true }) response: Response): Promise<S.GuestDoor> {
    const { door, token } = await this.guests.confirm(visit, body.code);
    this.cookie.set(response, token);
    return door;
  }

  @Post('leave') @HttpCode(204) @UseGuards(GuestGuard) @Route('guest', 'sign_in') @ApiNoContentResponse()
  async leave(@Visit() visit: Buffer, @Res({ passthrough: true }) response: Response): Promise<void> {
    await this.guests.leave(visit);
    this.cookie.clear(response);
  }

  @Get('visit') @UseGuards(GuestGuard) @Route('guest', 'read') @ApiOkResponse({ standardSchema: S.GuestVisit })
  visit(@Visit() visit: Buffer): Promise<S.GuestVisit> {
    return this.guests.visit(visit);
  }

  @Post('milestones/:milestoneId/inspections') @UseGuards(GuestGuard) @Route('guest', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.GuestVisit })
  async inspect(
    @Visit() visit: Buffer, @Param('milestoneId', { schema: Id }) milestoneId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.GuestInspect }) body: S.GuestInspect, @Res({ passthrough: true }) response: Response,
  ): Promise<S.GuestVisit> {
    return answer(response, await this.acts.inspect(visit, milestoneId, body, key));
  }

  @Post('photos') @UseGuards(GuestGuard) @Route('guest', 'upload') @ApiConsumes('multipart/form-data') @ApiBody(uploadBody('id', 'milestoneId')) @ApiCreatedResponse({ standardSchema: Photo })
  async photo(@Visit() visit: Buffer, @Req() request: Request, @Res({ passthrough: true }) response: Response): Promise<Photo> {
    return answer(response, await this.acts.addPhoto(visit, request, response));
  }

  @Get('photos/:photoId/:size') @UseGuards(GuestGuard) @Route('guest', 'read') @ApiOkResponse({ description: 'The picture in this size, without its metadata.' })
  async picture(@Visit() visit: Buffer, @Param('photoId', { schema: Id }) photoId: string, @Param('size', { schema: SizeName }) size: string, @Res() response: Response): Promise<void> {
    const { key, bytes } = await this.guests.size(visit, photoId, size);
    await sendStored(response, this.storage, { storageKey: key, mediaType: 'image/jpeg', bytes });
  }
}
