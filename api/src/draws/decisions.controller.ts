import { Body, Controller, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/draws';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { DecisionsService } from './decisions.service.ts';

const Job = () => Param('jobId', { schema: Id });
const OneDraw = () => Param('drawId', { schema: Id });

@ApiTags('draws')
@Controller('jobs/:jobId/draws/:drawId')
export class DecisionsController {
  constructor(private readonly decisions: DecisionsService) {}

  @Post('objections') @Route('draw.approve', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async object(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.ObjectToLine }) body: S.ObjectToLine, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.decisions.object({ actor, jobId, drawId, key }, body));
  }

  @Post('objections/:objectionId/withdraw') @Route('draw.approve', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async withdraw(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @Param('objectionId', { schema: Id }) objectionId: string,
    @IdempotencyKey() key: string, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.decisions.withdraw({ actor, jobId, drawId, key }, objectionId));
  }

  @Post('return') @Route('draw.approve', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async return(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.ReturnDraw }) body: S.ReturnDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.decisions.return({ actor, jobId, drawId, key }, body));
  }

  @Post('approvals') @Route('draw.approve', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async approve(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.ApproveDraw }) body: S.ApproveDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.decisions.approve({ actor, jobId, drawId, key }, body));
  }
}
