import { Injectable, Logger, type CanActivate, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import type { Request } from 'express';
import { Clock } from './clock.ts';
import { Problem } from './problem.ts';
import { RATE, type RateClass } from './route.ts';
import { UnitOfWork } from './unit-of-work.ts';

interface Limit {
  hits: number;
  seconds: number;
}

/**
 * Hits per window and source address, shared by all servers through an unlogged table. Reads are bounded by the pool alone, and what
 * Stripe sends by its signature. DEVELOPERS.md lists them; a test compares.
 */
export const LIMITS: Readonly<Record<RateClass, Limit | null>> = {
  read: null,
  webhook: null,
  write: { hits: 300, seconds: 60 },
  upload: { hits: 240, seconds: 60 },
  sign_in: { hits: 60, seconds: 300 },
  code: { hits: 30, seconds: 300 },
};

@Injectable()
export class RateLimitGuard implements CanActivate {
  private readonly logger = new Logger('rate-limit');

  constructor(
    private readonly reflector: Reflector,
    private readonly work: UnitOfWork,
    private readonly clock: Clock,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const rate = this.reflector.get<RateClass | undefined>(RATE, context.getHandler()) ?? 'write';
    const limit = LIMITS[rate];
    if (!limit) return true;
    const { ip = 'unknown', id } = context.switchToHttp().getRequest<Request & { id?: string }>();
    await this.take(`${rate}:${ip}`, limit, { address: ip, requestId: id });
    return true;
  }

  /** Counts one hit and refuses when there were too many in this window. The count is committed either way. `about` goes to the log with the first refusal. */
  async take(key: string, limit: Limit, about: object = {}): Promise<void> {
    const now = this.clock.now();
    const row = await this.work.write(undefined, (tx) => tx.one<{ hits: number }>('select app.hit($1, $2, $3) as hits', [key, limit.seconds, now]));
    const hits = row?.hits ?? 0;
    if (hits <= limit.hits) return;
    // once in a window: whoever floods us shall not flood the log; what follows the colon may be somebody's address
    if (hits === limit.hits + 1) this.logger.warn({ event: 'rate limit passed', limit: key.split(':')[0], ...about });
    const seconds = limit.seconds - (Math.floor(now.getTime() / 1_000) % limit.seconds);
    throw new Problem('too_many_tries', { retryAfterSeconds: seconds, detail: `Too many tries. Wait ${spoken(seconds)} and try again.` });
  }
}

const spoken = (seconds: number): string => (seconds <= 60 ? `${seconds} second${seconds === 1 ? '' : 's'}` : `${Math.ceil(seconds / 60)} minutes`);
