import { Inject, Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { CodeSent, Me } from '@tallypole/shared/schemas/auth';
import { Clock } from '../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { AccountRepository } from './account.repository.ts';
import { AuthService, CODES_PER_ADDRESS, CODE_MINUTES } from './auth.service.ts';
import { AuthRepository } from './auth.repository.ts';
import { Presence } from './presence.ts';
import { addressSubject } from './send-address.repository.ts';
import { codeHash, tokenHash } from './tokens.ts';

/** A person moves to another address: whoever reads mail there enters its code, and whoever reads it at the old one can undo it. */
@Injectable()
export class AddressService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: AccountRepository,
    private readonly sessions: AuthRepository,
    private readonly auth: AuthService,
    private readonly presence: Presence,
    private readonly limits: RateLimitGuard,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  /** The answer is the same whether the address is free or taken. */
  async ask(actor: Actor, email: string): Promise<CodeSent> {
    await this.limits.take(`code:${email}`, CODES_PER_ADDRESS);
    const now = this.clock.now();
    await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      if ((await this.sessions.person(tx)).email === email) throw Problem.field('/email', 'This is your address already.', 'same');
      const id = v7();
      await this.repository.askForAddress(tx, id, email, now);
      await this.queue.enqueue(tx, 'send_address_code', { changeId: id });
    });
    return { sentTo: email, expiresAt: new Date(now.getTime() + CODE_MINUTES * 60_000).toISOString() };
  }

  async change(actor: Actor, code: string): Promise<Me> {
    const hash = codeHash(this.configuration.CODE_SECRET, addressSubject(actor.personId), code);
    const outcome = await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      const row = await this.repository.changeAddress(tx, actor.sessionId, hash, this.clock.now());
      if (row?.change_id) await this.queue.enqueue(tx, 'tell_address_changed', { changeId: row.change_id });
      return row?.outcome ?? 'expired';
    });
    if (outcome === 'taken') throw new Problem('already_exists', { detail: 'Somebody signs in with this address already, so it was not taken over. Nothing was changed.' });
    if (outcome !== 'right') throw new Problem(outcome === 'wrong' ? 'wrong_code' : 'code_expired');
    return await this.auth.me(actor);
  }

  /** By the token that went to the old address; nobody is signed in. Answers the address that counts again. */
  async undo(token: string): Promise<{ email: string }> {
    const row = await this.work.write(undefined, (tx) => this.repository.undoAddress(tx, tokenHash(token), this.clock.now()));
    if (row?.outcome === 'taken') throw new Problem('already_exists', { detail: 'Somebody else signs in with the old address by now, so it cannot be given back.' });
    if (!row?.email) throw new Problem('link_over');
    return { email: row.email };
  }
}
