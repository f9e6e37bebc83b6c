import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/guest-links';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { GuestLinksService } from './guest-links.service.ts';

const Job = () => Param('jobId', { schema: Id });
const Link = () => Param('linkId', { schema: Id });

/** Links of a job, for those who send them. */
@ApiTags('guest-links')
@Controller('jobs/:jobId/guest-links')
export class GuestLinksController {
  constructor(private readonly links: GuestLinksService) {}

  @Get() @Route('guest_link.read', 'read') @ApiOkResponse({ standardSchema: S.GuestLinks })
  list(@CurrentActor() actor: Actor, @Job() jobId: string): Promise<S.GuestLinks> {
    return this.links.list(actor, jobId);
  }

  @Post() @Route('guest_link.send', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.GuestLinks })
  async send(
    @CurrentActor() actor: Actor, @Job() jobId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.SendInspectorLink }) body: S.SendInspectorLink, @Res({ passthrough: true }) response: Response,
  ): Promise<S.GuestLinks> {
    return answer(response, await this.links.send(actor, jobId, body, key));
  }

  @Post(':linkId/again') @Route('guest_link.send', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.GuestLinks })
  async again(@CurrentActor() actor: Actor, @Job() jobId: string, @Link() linkId: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.GuestLinks> {
    return answer(response, await this.links.sendAgain(actor, jobId, linkId, key));
  }

  @Post(':linkId/revoke') @Route('guest_link.send', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.GuestLinks })
  async revoke(@CurrentActor() actor: Actor, @Job() jobId: string, @Link() linkId: string, @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response): Promise<S.GuestLinks> {
    return answer(response, await this.links.revoke(actor, jobId, linkId, key));
  }
}
