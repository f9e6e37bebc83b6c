import { Injectable } from '@nestjs/common';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import type { Actor, Tx } from '../common/unit-of-work.ts';
import { AuthRepository } from './auth.repository.ts';

const PRESENT_MINUTES = 10;

/** Signing, approving and paying need the person, not just the open browser: a code entered within the last ten minutes. */
@Injectable()
export class Presence {
  constructor(
    private readonly repository: AuthRepository,
    private readonly clock: Clock,
  ) {}

  async require(tx: Tx, actor: Actor): Promise<void> {
    const at = await this.repository.presentAt(tx, actor.sessionId);
    if (!at || this.clock.now().getTime() - at.getTime() > PRESENT_MINUTES * 60_000) throw new Problem('presence_needed');
  }
}
