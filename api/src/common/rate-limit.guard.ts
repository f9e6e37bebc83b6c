import { Injectable, type CanActivate, type ExecutionContext } from '@nestjs/common';
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

/** Hits per window and source address, shared by all servers through an unlogged table. Reads are bounded by the pool alone. */
const LIMITS: Readonly<Record<RateClass, Limit | null>> = {
  read: null,
  webhook: null,
  write: { hits: 300, seconds: 60 },
  upload: { hits: 240, seconds: 60 },
  sign_in: { hits: 60, seconds: 300 },
  code: { hits: 30, seconds: 300 },
};

@Injectable()
export class RateLimitGuard implements CanActivate {
  constructor(
    private readonly reflector: Reflector,
    private readonly work: UnitOfWork,
    private readonly clock: Clock,
  ) {}

  async canActivate(context: ExecutionContext): Promise<boolean> {
    const rate = this.reflector.get<RateClass | undefined>(RATE, context.getHandler()) ?? 'write';
    const limit = LIMITS[rate];
    if (!limit) return true;
    const { ip } = context.switchToHttp().getRequest<Request>();
    await this.take(`${rate}:${ip ?? 'unknown'}`, limit);
    return true;
  }

  /** Counts one hit and refuses when there were too many in this window. The count is committed either way. */
  async take(key: string, limit: Limit): Promise<void> {
    const row = await this.work.write(undefined, (tx) => tx.one<{ hits: number }>('select app.hit($1, $2, $3) as hits', [key, limit.seconds, this.clock.now()]));
    if ((row?.hits ?? 0) > limit.hits) throw new Problem('too_many_tries', { retryAfterSeconds: limit.seconds });
  }
}
