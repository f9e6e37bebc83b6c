import { Body, Controller, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import * as S from '@tallypole/shared/schemas/firms';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { FirmsService } from './firms.service.ts';

@ApiTags('firms')
@Controller('firms')
export class FirmsController {
  constructor(private readonly firms: FirmsService) {}

  @Post() @Route('signed_in', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Firm })
  async start(
    @CurrentActor() actor: Actor,
    @Body({ schema: S.StartFirm }) body: S.StartFirm,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Firm> {
    return answer(response, await this.firms.start(actor, body, key));
  }
}
