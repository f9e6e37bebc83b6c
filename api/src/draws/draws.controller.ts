import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/draws';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { DrawsService } from './draws.service.ts';

const Job = () => Param('jobId', { schema: Id });
const OneDraw = () => Param('drawId', { schema: Id });

@ApiTags('draws')
@Controller('jobs/:jobId/draws')
export class DrawsController {
  constructor(private readonly draws: DrawsService) {}

  @Get() @Route('draw.read', 'read') @ApiOkResponse({ standardSchema: S.DrawList })
  list(@CurrentActor() actor: Actor, @Job() jobId: string): Promise<S.DrawList> {
    return this.draws.list(actor, jobId);
  }

  @Get(':drawId') @Route('draw.read', 'read') @ApiOkResponse({ standardSchema: S.Draw })
  get(@CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string): Promise<S.Draw> {
    return this.draws.draw(actor, jobId, drawId);
  }

  @Post() @Route('draw.prepare', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async start(
    @CurrentActor() actor: Actor, @Job() jobId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.StartDraw }) body: S.StartDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.draws.start(actor, jobId, body, key));
  }

  @Post(':drawId/draft') @Route('draw.prepare', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async redraft(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.Redraft }) body: S.Redraft, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.draws.redraft({ actor, jobId, drawId, key }, body));
  }

  @Post(':drawId/lines') @Route('draw.prepare', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async adjust(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.AdjustDraw }) body: S.AdjustDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.draws.adjust({ actor, jobId, drawId, key }, body));
  }

  @Post(':drawId/photos') @Route('draw.prepare', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async photos(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.SetDrawPhotos }) body: S.SetDrawPhotos, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.draws.setPhotos({ actor, jobId, drawId, key }, body));
  }

  @Post(':drawId/submit') @Route('draw.prepare', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async submit(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.SubmitDraw }) body: S.SubmitDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.draws.submit({ actor, jobId, drawId, key }, body));
  }

  @Post(':drawId/void') @Route('draw.prepare', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async void(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.VoidDraw }) body: S.VoidDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.draws.void({ actor, jobId, drawId, key }, body));
  }
}
