import { Body, Controller, Get, Param, Post, Res } from '@nestjs/common';
import { ApiCreatedResponse, ApiOkResponse, ApiTags } from '@nestjs/swagger';
import type { Response } from 'express';
import { z } from 'zod';
import { Id } from '@tallypole/shared/schemas/common';
import * as S from '@tallypole/shared/schemas/payments';
import { answer } from '../common/answer.ts';
import { ApiIdempotencyKey, CurrentActor, IdempotencyKey, Route } from '../common/route.ts';
import type { Actor } from '../common/unit-of-work.ts';
import { PaymentsService } from './payments.service.ts';

const Payments = z.object({ payments: z.array(S.Payment) });
type Payments = z.infer<typeof Payments>;

@ApiTags('payments')
@Controller('jobs/:jobId')
export class PaymentsController {
  constructor(private readonly payments: PaymentsService) {}

  @Post('draws/:drawId/payments') @Route('payment.start', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: S.PaymentProgress })
  async start(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Param('drawId', { schema: Id }) drawId: string,
    @Body({ schema: S.StartPayment }) body: S.StartPayment,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<S.PaymentProgress> {
    return answer(response, await this.payments.start(actor, jobId, drawId, body, key));
  }

  @Get('payments/:paymentId') @Route('payment.start', 'read') @ApiOkResponse({ standardSchema: S.PaymentProgress })
  progress(@CurrentActor() actor: Actor, @Param('jobId', { schema: Id }) jobId: string, @Param('paymentId', { schema: Id }) paymentId: string): Promise<S.PaymentProgress> {
    return this.payments.progress(actor, jobId, paymentId);
  }

  @Post('payments') @Route('payment.record', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: Payments })
  async record(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Body({ schema: S.RecordPayment }) body: S.RecordPayment,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Payments> {
    return answer(response, await this.payments.recordReceived(actor, jobId, body, key));
  }

  @Post('payments/:paymentId/receipt') @Route('payment.record', 'write') @ApiIdempotencyKey() @ApiCreatedResponse({ standardSchema: Payments })
  async confirm(
    @CurrentActor() actor: Actor,
    @Param('jobId', { schema: Id }) jobId: string,
    @Param('paymentId', { schema: Id }) paymentId: string,
    @Body({ schema: S.ConfirmReceipt }) body: S.ConfirmReceipt,
    @IdempotencyKey() key: string,
    @Res({ passthrough: true }) response: Response,
  ): Promise<Payments> {
    return answer(response, await this.payments.confirmReceipt(actor, jobId, paymentId, body.receivedOn, key));
  }
}
