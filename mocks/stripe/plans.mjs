/**
 * What the future holds: settlements, failures, late returns, expiry. Kept in the store, so that a restart forgets none.
 * @typedef {import('./types.d.ts').Act} Act
 * @typedef {import('./types.d.ts').Plan} Plan
 */

/**
 * @param {Act} act
 * @param {Omit<Plan, 'at'> & { after: number | null }} plan `after` in milliseconds; negative or null waits for a call
 */
export function schedule(act, plan) {
  const { after, ...rest } = plan;
  const at = after === null || after < 0 ? null : act.world.nowMs() + after;
  act.tx.put('plan', act.account, { ...rest, at });
}
