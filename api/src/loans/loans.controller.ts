import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/loans';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { LoansService } from './loans.service.ts';

@ApiTags('loans')
@Controller('jobs/:jobId/loan')
export class LoansController {
  constructor(private readonly loans: LoansService) {}

  @Get() @Route('draw.read', 'read') @ApiOkResponse({ standardSchema: S.JobLoan })
  get(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string): Promise<S.JobLoan> {
    return this.loans.loan(actor, jobId);
  }

  @Post() @Route('loan.terms', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.JobLoan })
  async set(
    @CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string, @IdempotencyKey() key: string,
    @Body({ schema: S.SetLoan }) body: S.SetLoan, @Res({ passthrough: true }) response: Response,
  ): Promise<S.JobLoan> {
    return answer(response, await this.loans.set(actor, jobId, body, key));
  }
}
