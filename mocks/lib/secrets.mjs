import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { Failure } from './failure.mjs';

const random = () => randomBytes(36).toString('base64url');

/** Secrets of this checkout, made once and kept out of git. */
const makers = {
  JWT_SECRET: random,
  CODE_SECRET: random,
  SECOND_FACTOR_KEYS: () => `k1:${randomBytes(32).toString('base64url')}`,
  STRIPE_SECRET_KEY: () => `sk_test_${random().replaceAll(/[-_]/g, '0')}`,
  STRIPE_WEBHOOK_SECRET: () => `whsec_${random()}`,
};

/**
 * @param {string} file
 * @returns {Record<keyof typeof makers, string>}
 */
export function secretsIn(file) {
  /** @type {Record<string, string>} */
  let kept = {};
  if (existsSync(file)) {
    try {
      kept = JSON.parse(readFileSync(file, 'utf8'));
    } catch {
      throw new Failure(`${file} is not readable JSON. Restore it, or remove it: everybody then has to sign in again.`);
    }
  }
  const all = /** @type {Record<keyof typeof makers, string>} */ (Object.fromEntries(Object.entries(makers).map(([name, make]) => [name, kept[name] ?? make()])));
  if (Object.keys(makers).some((name) => !kept[name])) {
    mkdirSync(path.dirname(file), { recursive: true });
    writeFileSync(file, `${JSON.stringify(all, null, 2)}\n`, { mode: 0o600 });
  }
  return all;
}
