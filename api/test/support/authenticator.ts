import { createHmac } from 'node:crypto';
import { hotp, timeStep } from '@tallypole/shared/otp';
import type { RecoveryCodes, SecondStepKey } from '@tallypole/shared/schemas/auth-account';
import type { Visitor } from './visitor.ts';

const ALPHABET = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567';

/** An authenticator on somebody's phone, into which the key was typed. */
export class Authenticator {
  readonly secret: Buffer;

  constructor(key: string) {
    const bits = [...key].map((letter) => ALPHABET.indexOf(letter).toString(2).padStart(5, '0')).join('');
    this.secret = Buffer.from((bits.match(/.{8}/g) ?? []).map((byte) => parseInt(byte, 2)));
  }

  /** What it shows, or showed some steps of thirty seconds ago. */
  code(steps = 0): string {
    return hotp((message) => createHmac('sha1', this.secret).update(message).digest(), timeStep(Date.now()) + steps);
  }

  /** Six digits that it shows neither now nor a step before or after. */
  wrong(): string {
    const shown = [-2, -1, 0, 1, 2].map((steps) => this.code(steps));
    return ['000000', '111111', '222222', '333333', '444444', '555555'].find((code) => !shown.includes(code)) ?? '666666';
  }
}

/** Somebody sets up their second step, all through the interface. */
export async function enrol(visitor: Visitor): Promise<{ authenticator: Authenticator; recoveryCodes: string[] }> {
  const started = await visitor.post('/me/second-step', {}, null);
  if (started.status !== 201) throw new Error(started.text);
  const authenticator = new Authenticator((started.body as SecondStepKey).key);
  // the step before, so that the present one is left for what follows
  const confirmed = await visitor.post('/me/second-step/confirm', { code: authenticator.code(-1) }, null);
  if (confirmed.status !== 200) throw new Error(confirmed.text);
  return { authenticator, recoveryCodes: (confirmed.body as RecoveryCodes).codes };
}
