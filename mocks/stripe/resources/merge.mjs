/**
 * Metadata after an update: pairs are added or replaced, an empty value removes its key, an empty whole removes all.
 * @param {Record<string, string> | null | undefined} before
 * @param {Record<string, string>} change
 * @returns {Record<string, string>}
 */
export function merged(before, change) {
  if (Object.keys(change).length === 0) return {};
  return Object.fromEntries(Object.entries({ ...before, ...change }).filter(([, value]) => value !== ''));
}
