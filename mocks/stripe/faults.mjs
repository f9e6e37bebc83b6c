/**
 * Outages on demand.
 * @typedef {import('./types.d.ts').Fault} Fault
 */

/** @type {Fault['mode'][]} */
export const faultModes = ['error', 'error_stored', 'error_after', 'hang', 'hang_after', 'drop', 'drop_after', 'slow'];

/**
 * The oldest fault that hits this call, counted down.
 * @param {import('./types.d.ts').World} world
 * @param {string} method
 * @param {string} path
 * @returns {Fault | undefined}
 */
export function takeFault(world, method, path) {
  if (world.store.ofKind('fault').size === 0) return undefined;
  return world.store.transaction((tx) => {
    const fault = tx
      .all('fault')
      .map((r) => r.value)
      .find(
        (f) => (f.method === undefined || f.method === method) && (f.path === undefined || path.startsWith(f.path)),
      );
    if (fault && fault.times !== null) {
      if (fault.times <= 1) tx.remove('fault', fault.id);
      else tx.change('fault', fault.id, { times: fault.times - 1 });
    }
    return fault;
  });
}
