import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/draws';
import { Lending } from '@tallypole/shared/schemas/lending';
import type * as L from '@tallypole/shared/schemas/lending';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { LendingService } from './lending.service.ts';
import { ReviewsService } from './reviews.service.ts';

const Job = () => Param('jobId', { schema: Id });
const OneDraw = () => Param('drawId', { schema: Id });

@ApiTags('lending')
@Controller()
export class LendingController {
  constructor(
    private readonly lending: LendingService,
    private readonly reviews: ReviewsService,
  ) {}

  @Get('lending') @Route('signed_in', 'read') @ApiOkResponse({ standardSchema: Lending })
  queue(@CurrentActor() actor: Actor): Promise<L.Lending> {
    return this.lending.queue(actor);
  }

  @Post('jobs/:jobId/draws/:drawId/review/inspections') @Route('draw.fund', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async inspect(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.Inspected }) body: S.Inspected, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.reviews.inspect({ actor, jobId, drawId, key }, body));
  }

  @Post('jobs/:jobId/draws/:drawId/review/allowances') @Route('draw.fund', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async allow(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.AllowDraw }) body: S.AllowDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.reviews.allow({ actor, jobId, drawId, key }, body));
  }

  @Post('jobs/:jobId/draws/:drawId/review/fundings') @Route('draw.fund', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Draw })
  async fund(
    @CurrentActor() actor: Actor, @Job() jobId: string, @OneDraw() drawId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.FundDraw }) body: S.FundDraw, @Res({ passthrough: true }) response: Response,
  ): Promise<S.Draw> {
    return answer(response, await this.reviews.fund({ actor, jobId, drawId, key }, body));
  }
}
