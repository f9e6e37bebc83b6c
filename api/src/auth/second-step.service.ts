import { randomBytes } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import { base32, enrolmentUri } from '@tallypole/shared/otp';
import type { RecoveryCodes, SecondStepKey } from '@tallypole/shared/schemas/auth-account';
import { Clock } from '../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { AccountNotices } from './account-notices.ts';
import { secondStepWords } from './account-words.ts';
import { AccountRepository } from './account.repository.ts';
import { AccountService } from './account.service.ts';
import { AuthRepository } from './auth.repository.ts';
import { Presence } from './presence.ts';
import { SecondStepCheck } from './second-step-check.ts';
import { hashRecoveryCode, newSalt } from './slow-hash.ts';
import { newRecoveryCode } from './tokens.ts';

/** RFC 4226 asks for 128 bits and advises 160. */
const SECRET_BYTES = 20;
const RECOVERY_CODES = 10;

/** A person turns their second step on and off, and gets recovery codes. */
@Injectable()
export class SecondStepService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: AccountRepository,
    private readonly sessions: AuthRepository,
    private readonly check: SecondStepCheck,
    private readonly presence: Presence,
    private readonly account: AccountService,
    private readonly notices: AccountNotices,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  /** A new key, which counts once a code of it was right. */
  async start(actor: Actor): Promise<SecondStepKey> {
    const secret = randomBytes(SECRET_BYTES);
    return await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      if ((await this.repository.lockStep(tx))?.confirmedAt) throw alreadyOn();
      const { email } = await this.sessions.person(tx);
      await this.repository.startStep(tx, this.check.seal(secret, actor.personId), this.clock.now());
      return { uri: enrolmentUri(`Tallypole (${new URL(this.configuration.PUBLIC_URL).hostname})`, email, secret), key: base32(secret) };
    });
  }

  async confirm(actor: Actor, code: string): Promise<RecoveryCodes> {
    const now = this.clock.now();
    const confirmed = await this.work.write(actor, async (tx) => {
      const kept = await this.repository.lockStep(tx);
      if (kept?.confirmedAt) throw alreadyOn();
      if (!kept) throw new Problem('wrong_state', { detail: 'There is no key to confirm any more. Begin again.' });
      const outcome = await this.check.byTime(tx, kept, actor.personId, code, now);
      if (outcome !== 'right') return { outcome };
      await this.sessions.endOtherSessions(tx, actor.sessionId, now);
      const codes = await this.newCodes(tx);
      await this.notices.post(tx, actor.personId, 'second-step-changed', secondStepWords.on);
      return { outcome, codes };
    });
    if (!confirmed.codes) throw this.check.refusal(confirmed.outcome);
    return { codes: confirmed.codes, account: await this.account.read(actor) };
  }

  /** Ten new ones; those from before are no longer good. */
  async renewRecoveryCodes(actor: Actor): Promise<RecoveryCodes> {
    const codes = await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      if (!(await this.repository.lockStep(tx))?.confirmedAt) throw new Problem('wrong_state');
      await this.notices.post(tx, actor.personId, 'second-step-changed', secondStepWords.codes);
      return await this.newCodes(tx);
    });
    return { codes, account: await this.account.read(actor) };
  }

  async remove(actor: Actor): Promise<void> {
    await this.work.write(actor, async (tx) => {
      await this.presence.require(tx, actor);
      if (!(await this.repository.removeStep(tx))) return;
      await this.sessions.endOtherSessions(tx, actor.sessionId, this.clock.now());
      await this.notices.post(tx, actor.personId, 'second-step-changed', secondStepWords.off);
    });
  }

  private async newCodes(tx: Tx): Promise<string[]> {
    const salt = newSalt();
    const codes = Array.from({ length: RECOVERY_CODES }, newRecoveryCode);
    await this.repository.keepRecoveryCodes(tx, salt, await Promise.all(codes.map((code) => hashRecoveryCode(code, salt))));
    return codes.map((code) => `${code.slice(0, 5)}-${code.slice(5)}`);
  }
}

const alreadyOn = (): Problem => new Problem('wrong_state', { detail: 'Your second step is on already. Turn it off first to use another authenticator.' });
