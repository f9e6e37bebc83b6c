import { createHmac } from 'node:crypto';
import { Inject, Injectable } from '@nestjs/common';
import { stepOfCode } from '@tallypole/shared/otp';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { AccountNotices } from './account-notices.ts';
import { recoveryUsedWords } from './account-words.ts';
import { AccountRepository, type KeptStep } from './account.repository.ts';
import { SecretBox, type Sealed } from './secret-box.ts';
import { hashRecoveryCode } from './slow-hash.ts';

/** Wrong codes of the authenticator in an hour; after that a recovery code still helps. */
const WRONG = { most: 10, milliseconds: 3_600_000 };
const DIGITS = 6;

export type StepOutcome = 'right' | 'wrong' | 'too_many' | 'none';

/** Whether a code is the person's second step. The person acts in the transaction; a wrong code is a result, so that it is counted. */
@Injectable()
export class SecondStepCheck {
  private readonly box: SecretBox;

  constructor(
    private readonly repository: AccountRepository,
    private readonly notices: AccountNotices,
    @Inject(CONFIGURATION) configuration: Configuration,
  ) {
    this.box = new SecretBox(configuration.SECOND_FACTOR_KEYS);
  }

  /** `none` where the person has no second step. */
  async code(tx: Tx, personId: string, code: string, now: Date): Promise<StepOutcome> {
    const kept = await this.repository.lockStep(tx);
    if (!kept?.confirmedAt) return 'none';
    return code.length === DIGITS ? await this.byTime(tx, kept, personId, code, now) : await this.byRecovery(tx, kept, personId, code, now);
  }

  async byTime(tx: Tx, kept: KeptStep, personId: string, code: string, now: Date): Promise<StepOutcome> {
    const recent = kept.wrongSince !== null && now.getTime() - kept.wrongSince.getTime() < WRONG.milliseconds;
    const tries = recent ? kept.wrongTries : 0;
    if (tries >= WRONG.most) return 'too_many';
    const secret = this.box.open(kept, personId);
    const step = stepOfCode((message) => createHmac('sha1', secret).update(message).digest(), code, now.getTime(), kept.lastStep);
    if (step === null) {
      await this.repository.wrongCode(tx, tries + 1, recent && kept.wrongSince ? kept.wrongSince : now);
      return 'wrong';
    }
    // a secret under an older key moves to the current one when it is used
    await this.repository.usedStep(tx, step, kept.keyId === this.box.currentKeyId ? kept : this.seal(secret, personId), now);
    return 'right';
  }

  seal = (secret: Buffer, personId: string): Sealed => this.box.seal(secret, personId);

  /** What is said where a code was not right. */
  refusal(outcome: StepOutcome): Problem {
    if (outcome === 'too_many') return new Problem('too_many_tries', { retryAfterSeconds: WRONG.milliseconds / 1000, detail: 'Too many wrong codes. Use a recovery code, or wait an hour.' });
    return new Problem('wrong_code', { errors: [{ pointer: '/code', code: 'wrong_code', message: 'That code is not right, or it was used already. Enter the one that the authenticator shows now.' }] });
  }

  private async byRecovery(tx: Tx, kept: KeptStep, personId: string, code: string, now: Date): Promise<StepOutcome> {
    if (!kept.recoverySalt) return 'wrong';
    const left = await this.repository.useRecoveryCode(tx, await hashRecoveryCode(code, kept.recoverySalt), now);
    if (left === undefined) return 'wrong';
    await this.notices.post(tx, personId, 'second-step-changed', recoveryUsedWords(left));
    return 'right';
  }
}
