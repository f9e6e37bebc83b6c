import { Body, Controller, Get, HttpCode, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import * as S from '@tallypole/shared/schemas/changes';
import { Id } from '@tallypole/shared/schemas/common';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { ChangesService } from './changes.service.ts';

@ApiTags('changes')
@Controller('jobs/:jobId/changes')
export class ChangesController {
  constructor(private readonly changes: ChangesService) {}

  @Get() @Route('change.read', 'read') @ApiOkResponse({ standardSchema: S.ChangeList })
  list(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.ChangeList> {
    return this.changes.list(actor, jobId);
  }

  @Get(':changeId') @Route('change.read', 'read') @ApiOkResponse({ standardSchema: S.Change })
  get(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string, @Param('changeId', { schema: Id }) changeId: string): Promise<S.Change> {
    return this.changes.change(actor, jobId, changeId);
  }

  /** What a draft would come to; nothing is written. */
  @Post('price') @HttpCode(200) @Route('change.price', 'write') @ApiOkResponse({ standardSchema: S.ChangeCost })
  price(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string, @Body({ schema: S.DraftChange }) body: S.DraftChange): Promise<S.ChangeCost> {
    return this.changes.price(actor, jobId, body);
  }

  @Post() @Route('change.price', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Change })
  async start(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Body({ schema: S.DraftChange }) body: S.DraftChange,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Change> {
    return answer(response, await this.changes.start(actor, jobId, body, key));
  }

  @Post(':changeId') @HttpCode(200) @Route('change.price', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.Change })
  async edit(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Param('changeId', { schema: Id }) changeId: string,
    @Body({ schema: S.EditChange }) body: S.EditChange,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Change> {
    return answer(response, await this.changes.edit(actor, jobId, changeId, body, key));
  }

  @Post(':changeId/revisions') @Route('change.price', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Change })
  async revise(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Param('changeId', { schema: Id }) changeId: string,
    @Body({ schema: S.DraftChange }) body: S.DraftChange,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Change> {
    return answer(response, await this.changes.revise(actor, jobId, changeId, body, key));
  }
}
