import { LogFile } from './log-file.mjs';

/**
 * @typedef {import('./types.d.ts').Kinds} Kinds
 * @typedef {import('./types.d.ts').Kind} Kind
 * @typedef {{ kind: Kind, id: string, account: string, seq: number, value: Kinds[Kind] }} Row
 * @typedef {[Kind, string, string, number, Kinds[Kind] | null]} Written  kind, id, account, sequence, value (null: gone)
 */

const rewriteAfterBytes = 8 * 1024 * 1024;

/**
 * Every object of the stand-in, in memory and in a file that survives `kill -9`. All that one act changes (objects,
 * events, deliveries, the saved answer of its idempotency key) is one line of the file: all of it or nothing.
 */
export class Store {
  /** @param {string} folder */
  constructor(folder) {
    this.log = new LogFile(folder);
    /** @type {Map<string, Row>} */
    this.rows = new Map();
    /** @type {Map<Kind, Map<string, Row>>} */
    this.byKind = new Map();
    this.seq = 0;
    for (const line of this.log.read()) this.apply(/** @type {{ w: Written[] }} */ (line).w);
    this.log.rewrite(this.lines());
  }

  /**
   * Runs an act. What it wrote is on the disk when this returns; nothing of it remains when it throws.
   * @template T
   * @param {(tx: Tx) => T} work must not wait for anything: acts follow each other, one at a time
   * @returns {T}
   */
  transaction(work) {
    const tx = new Tx(this);
    const result = work(tx);
    if (tx.changes.size > 0) {
      const written = [...tx.changes.values()].map((row) => toWritten(row.row));
      this.log.append({ w: written });
      this.apply(written);
      if (this.log.written > Math.max(rewriteAfterBytes, this.log.size / 2)) this.log.rewrite(this.lines());
    }
    return result;
  }

  /**
   * Forgets rows that no longer matter, so that the file doesn't grow for ever.
   * @param {(row: Row) => boolean} stale
   */
  prune(stale) {
    for (const row of [...this.rows.values()]) if (stale(row)) this.forget(row);
    this.log.rewrite(this.lines());
  }

  /** Forgets everything. */
  clear() {
    this.rows.clear();
    this.byKind.clear();
    this.log.rewrite([]);
  }

  close() {
    this.log.close();
  }

  /** @param {Written[]} written */
  apply(written) {
    for (const [kind, id, account, seq, value] of written) {
      this.seq = Math.max(this.seq, seq);
      const before = this.rows.get(rowKey(kind, id));
      if (value === null) {
        if (before) this.forget(before);
        continue;
      }
      const row = { kind, id, account, seq, value: freeze(value) };
      this.rows.set(rowKey(kind, id), row);
      this.ofKind(kind).set(id, row);
    }
  }

  /** @param {Row} row */
  forget(row) {
    this.rows.delete(rowKey(row.kind, row.id));
    this.ofKind(row.kind).delete(row.id);
  }

  /** @param {Kind} kind */
  ofKind(kind) {
    const known = this.byKind.get(kind);
    if (known) return known;
    /** @type {Map<string, Row>} */
    const fresh = new Map();
    this.byKind.set(kind, fresh);
    return fresh;
  }

  lines() {
    return [...this.rows.values()].map((row) => ({ w: [toWritten({ ...row, gone: false })] }));
  }
}

/** The view of one act: it sees its own changes, nobody else does before they are on the disk. */
export class Tx {
  /** @param {Store} store */
  constructor(store) {
    this.store = store;
    /** @type {Map<string, { row: Row & { gone: boolean } }>} */
    this.changes = new Map();
    this.seq = store.seq;
  }

  /**
   * @template {Kind} K
   * @param {K} kind
   * @param {string} id
   * @param {string} [account] another account's object is not found
   * @returns {Kinds[K] | undefined}
   */
  find(kind, id, account) {
    const row = this.row(kind, id);
    if (!row || (account !== undefined && row.account !== account)) return undefined;
    return /** @type {Kinds[K]} */ (row.value);
  }

  /**
   * @param {Kind} kind
   * @param {string} id
   * @returns {Row | undefined}
   */
  row(kind, id) {
    const changed = this.changes.get(rowKey(kind, id))?.row;
    if (changed) return changed.gone ? undefined : changed;
    return this.store.rows.get(rowKey(kind, id));
  }

  /**
   * @template {Kind} K
   * @param {K} kind
   * @param {string} account
   * @param {Kinds[K] & { id: string }} value
   * @returns {Kinds[K]}
   */
  put(kind, account, value) {
    const seq = this.row(kind, value.id)?.seq ?? (this.seq += 1);
    this.changes.set(rowKey(kind, value.id), {
      row: { kind, id: value.id, account, seq, value: freeze(value), gone: false },
    });
    return value;
  }

  /**
   * Writes over some fields of an object that exists.
   * @template {Kind} K
   * @param {K} kind
   * @param {string} id
   * @param {Partial<Kinds[K]>} change
   * @returns {Kinds[K]}
   */
  change(kind, id, change) {
    const row = this.row(kind, id);
    if (!row) throw new Error(`There is no ${kind} ${id} to change`);
    return this.put(kind, row.account, /** @type {Kinds[K] & { id: string }} */ ({ ...row.value, ...change }));
  }

  /**
   * @param {Kind} kind
   * @param {string} id
   */
  remove(kind, id) {
    const row = this.row(kind, id);
    if (row) this.changes.set(rowKey(kind, id), { row: { ...row, gone: true } });
  }

  /**
   * Every object of a kind, oldest first.
   * @template {Kind} K
   * @param {K} kind
   * @param {string} [account]
   * @returns {Array<{ account: string, seq: number, value: Kinds[K] }>}
   */
  all(kind, account) {
    /** @type {Map<string, Row>} */
    const rows = new Map(this.store.ofKind(kind));
    for (const { row } of this.changes.values()) {
      if (row.kind !== kind) continue;
      if (row.gone) rows.delete(row.id);
      else rows.set(row.id, row);
    }
    const wanted = [...rows.values()].filter((row) => account === undefined || row.account === account);
    wanted.sort((a, b) => a.seq - b.seq);
    return /** @type {Array<{ account: string, seq: number, value: Kinds[K] }>} */ (/** @type {unknown} */ (wanted));
  }
}

/**
 * @param {Kind} kind
 * @param {string} id
 */
const rowKey = (kind, id) => `${kind} ${id}`;

/**
 * @param {Row & { gone: boolean }} row
 * @returns {Written}
 */
const toWritten = (row) => [row.kind, row.id, row.account, row.seq, row.gone ? null : row.value];

/**
 * Stored objects are never edited in place: a change that is thrown away must leave no trace.
 * @template T
 * @param {T} value
 * @returns {T}
 */
function freeze(value) {
  if (typeof value === 'object' && value !== null && !Object.isFrozen(value)) {
    Object.freeze(value);
    for (const part of Object.values(value)) freeze(part);
  }
  return value;
}
