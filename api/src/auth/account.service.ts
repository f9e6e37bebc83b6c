import { Inject, Injectable } from '@nestjs/common';
import type { Account } from '@tallypole/shared/schemas/auth-account';
import { Clock } from '../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { AccountNotices } from './account-notices.ts';
import { AccountRepository } from './account.repository.ts';
import { AuthRepository } from './auth.repository.ts';
import { guessable } from './guessable.ts';
import { Presence } from './presence.ts';
import { secondStepRequired } from './second-step-required.ts';
import { hashPassword } from './slow-hash.ts';

/**
 * A person's own ways in: password and sessions. These acts stand outside of the command runner, which would keep a hash of what was
 * entered: each does the same when it is sent twice.
 */
@Injectable()
export class AccountService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: AccountRepository,
    private readonly sessions: AuthRepository,
    private readonly presence: Presence,
    private readonly notices: AccountNotices,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  read(actor: Actor): Promise<Account> {
    return this.work.read(actor, (tx) => this.repository.account(tx, actor.sessionId, this.clock.now(), secondStepRequired(this.configuration)));
  }

  async setPassword(actor: Actor, password: string): Promise<Account> {
    const person = await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      return await this.sessions.person(tx);
    });
    const why = await guessable(password, person);
    if (why !== null) throw Problem.field('/password', why, 'guessable');
    const hash = await hashPassword(password);
    await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      const now = this.clock.now();
      const what = await this.repository.setPassword(tx, hash, now);
      await this.sessions.endOtherSessions(tx, actor.sessionId, now);
      await this.notices.post(tx, actor.personId, 'password-changed', { what });
    });
    return await this.read(actor);
  }

  async removePassword(actor: Actor): Promise<Account> {
    await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      if (!(await this.repository.removePassword(tx))) return;
      await this.sessions.endOtherSessions(tx, actor.sessionId, this.clock.now());
      await this.notices.post(tx, actor.personId, 'password-changed', { what: 'removed' });
    });
    return await this.read(actor);
  }

  async endSession(actor: Actor, sessionId: string): Promise<Account> {
    const found = await this.work.write(actor, (tx) => this.repository.endSession(tx, sessionId, this.clock.now()));
    if (!found && !(await this.isMine(actor, sessionId))) throw new Problem('not_found');
    return await this.read(actor);
  }

  async endOtherSessions(actor: Actor): Promise<Account> {
    await this.work.write(actor, (tx) => this.sessions.endOtherSessions(tx, actor.sessionId, this.clock.now()));
    return await this.read(actor);
  }

  /** Ended before: the same answer as the first time. */
  private async isMine(actor: Actor, sessionId: string): Promise<boolean> {
    return await this.work.read(actor, async (tx) => (await this.sessions.presentAt(tx, sessionId)) !== undefined);
  }
}
