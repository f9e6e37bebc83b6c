import { Controller, HttpCode, Post, Req } from '@nestjs/common';
import type { RawBodyRequest } from '@nestjs/common';
import { ApiNoContentResponse, ApiTags } from '@nestjs/swagger';
import type { Request } from 'express';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { Route } from '../common/route.ts';
import { UnitOfWork } from '../common/unit-of-work.ts';
import { StripeClient } from './stripe-client.ts';
import { StripeEventsRepository } from './stripe-events.repository.ts';

@ApiTags('payments')
@Controller('payments/webhook')
export class WebhookController {
  constructor(
    private readonly stripe: StripeClient,
    private readonly events: StripeEventsRepository,
    private readonly work: UnitOfWork,
    private readonly clock: Clock,
  ) {}

  /** Signed by Stripe over the raw bytes. Stored before anything is done; answered when it is stored, so that what is lost is sent again. */
  @Post() @HttpCode(204) @Route('public', 'webhook') @ApiNoContentResponse()
  async receive(@Req() request: RawBodyRequest<Request>): Promise<void> {
    const signature = request.get('stripe-signature');
    const news = request.rawBody && signature ? this.stripe.readNews(request.rawBody, signature) : undefined;
    if (!news) throw new Problem('malformed_request', { detail: 'The signature does not hold, or it is too old.' });
    await this.work.write(undefined, (tx) => this.events.store(tx, news, this.clock.now()));
  }
}
