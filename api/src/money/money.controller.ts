import { Controller, Get, Param } from '@nestjs/common';
import { ApiOkResponse, ApiTags } from '@nestjs/swagger';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/money';
import { CurrentActor, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { MoneyService } from './money.service.ts';

@ApiTags('money')
@Controller('jobs/:jobId/money')
export class MoneyController {
  constructor(private readonly service: MoneyService) {}

  @Get() @Route('money.read', 'read') @ApiOkResponse({ standardSchema: S.JobMoney })
  get(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.JobMoney> {
    return this.service.money(actor, jobId);
  }

  @Get('ahead') @Route('money.read', 'read') @ApiOkResponse({ standardSchema: S.JobCashAhead })
  ahead(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.JobCashAhead> {
    return this.service.ahead(actor, jobId);
  }
}
