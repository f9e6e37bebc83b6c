import { missing } from './errors.mjs';
import { present } from './present.mjs';

/**
 * @typedef {import('./types.d.ts').Act} Act
 * @typedef {import('./types.d.ts').PublicKind} PublicKind
 * @typedef {import('./types.d.ts').PublicKinds} PublicKinds
 * @typedef {{ limit?: number | undefined, starting_after?: string | undefined, ending_before?: string | undefined }} Paging
 * @typedef {{ gt?: number | undefined, gte?: number | undefined, lt?: number | undefined, lte?: number | undefined }} Range
 */

/**
 * A page of an account's objects, the newest first.
 * @template {PublicKind} K
 * @param {Act} act
 * @param {K} kind
 * @param {string} url
 * @param {Paging} paging
 * @param {(value: PublicKinds[K]) => boolean} [wanted]
 * @returns {{ object: 'list', data: Array<PublicKinds[K]>, has_more: boolean, url: string }}
 */
export function listPage(act, kind, url, paging, wanted = () => true) {
  const all = /** @type {Array<PublicKinds[K] & { id: string }>} */ (
    act.tx
      .all(kind, act.account)
      .map((r) => r.value)
      .reverse()
  );
  const found = all.filter(wanted);
  const limit = paging.limit ?? 10;
  const place = (/** @type {string} */ id, /** @type {string} */ param) => {
    const at = found.findIndex((v) => v.id === id);
    if (at < 0) throw missing(kind, id, param);
    return at;
  };
  let from = 0;
  let to = Math.min(limit, found.length);
  let more = found.length > limit;
  if (paging.starting_after !== undefined) {
    from = place(paging.starting_after, 'starting_after') + 1;
    to = from + limit;
    more = found.length > to;
  } else if (paging.ending_before !== undefined) {
    to = place(paging.ending_before, 'ending_before');
    from = Math.max(0, to - limit);
    more = from > 0;
  }
  return {
    object: 'list',
    data: found.slice(from, to).map((v) => present(act.tx, kind, v, act.now)),
    has_more: more,
    url,
  };
}

/**
 * @param {Range | undefined} range
 * @param {number} at seconds
 */
export const within = (range, at) =>
  range === undefined ||
  ((range.gt === undefined || at > range.gt) &&
    (range.gte === undefined || at >= range.gte) &&
    (range.lt === undefined || at < range.lt) &&
    (range.lte === undefined || at <= range.lte));
