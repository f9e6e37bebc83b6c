import { Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/payouts';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { PayoutsService } from './payouts.service.ts';

@ApiTags('payments')
@Controller('firms/:firmId/payouts')
export class PayoutsController {
  constructor(private readonly payouts: PayoutsService) {}

  @Get() @Route('payout.setup', 'read') @ApiOkResponse({ standardSchema: S.Payouts })
  get(@CurrentActor() actor: Actor, @Param('firmId', { schema: Id }) firmId: string): Promise<S.Payouts> {
    return this.payouts.payouts(actor, firmId);
  }

  @Post() @Route('payout.setup', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.Payouts })
  async setUp(
    @CurrentActor() actor: Actor,
    @Param('firmId', { schema: Id }) firmId: string,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.Payouts> {
    return answer(response, await this.payouts.setUp(actor, firmId, key));
  }
}
