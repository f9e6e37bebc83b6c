import { hotp, type Hmac } from './hotp.ts';

const STEP_SECONDS = 30;
/** Steps that a clock may be off, either way. */
const DRIFT = 1;

/** The time step of an instant (RFC 6238, section 4). */
export const timeStep = (milliseconds: number): number => Math.floor(milliseconds / 1000 / STEP_SECONDS);

/**
 * The time step that a code belongs to, or null: the step of `milliseconds`, or one beside it for a clock that is off. Steps up to
 * `lastUsed` are no longer good, so that no code counts twice, nor one that is older than a used one (RFC 6238, section 5.2).
 */
export function stepOfCode(hmac: Hmac, code: string, milliseconds: number, lastUsed: number): number | null {
  const now = timeStep(milliseconds);
  let found: number | null = null;
  // all of them, so that the time it takes tells nothing
  for (let step = now + DRIFT; step >= now - DRIFT; step -= 1) if (step >= 0 && step > lastUsed && hotp(hmac, step, code.length) === code) found = step;
  return found;
}
