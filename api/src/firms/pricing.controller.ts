import { Body, Controller, Get, HttpCode, Param, Post, Res } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import * as S from '@tallypole/shared/schemas/changes';
import { Id } from '@tallypole/shared/schemas/common';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { PricingService } from './pricing.service.ts';

@ApiTags('firms')
@Controller('firms/:firmId/pricing')
export class PricingController {
  constructor(private readonly pricing: PricingService) {}

  @Get() @Route('firm.pricing', 'read') @ApiOkResponse({ standardSchema: S.FirmPricing })
  get(@CurrentActor() actor: Actor, @Param('firmId', { schema: Id }) firmId: string): Promise<S.FirmPricing> {
    return this.pricing.terms(actor, firmId);
  }

  @Post() @HttpCode(200) @Route('firm.pricing', 'write') @ApiIdempotencyKey() @ApiOkResponse({ standardSchema: S.FirmPricing })
  async set(
    @CurrentActor() actor: Actor,
    @Param('firmId', { schema: Id }) firmId: string,
    @Body({ schema: S.SetFirmPricing }) body: S.SetFirmPricing,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.FirmPricing> {
    return answer(response, await this.pricing.set(actor, firmId, body, key));
  }
}
