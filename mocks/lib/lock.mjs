import { mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { codeOf } from './failure.mjs';
import { identity, lives, pause } from './processes.mjs';

/**
 * Takes a lock file that names its holder; a lock whose holder is gone is taken over.
 * @param {string} file
 * @returns {{ release: () => void, stale: boolean } | { holder: string }} stale: the holder before us died with it
 */
export function tryLock(file) {
  const me = identity(process.pid) ?? String(process.pid);
  mkdirSync(path.dirname(file), { recursive: true });
  for (let stale = false; ; stale = true) {
    try {
      writeFileSync(file, me, { flag: 'wx' });
      return { release: () => releaseLock(file, me), stale };
    } catch (error) {
      if (codeOf(error) !== 'EEXIST') throw error;
    }
    const holder = lockHolder(file);
    if (holder) return { holder };
    rmSync(file, { force: true });
  }
}

/**
 * The living holder of a lock file, if any.
 * @param {string} file
 */
export function lockHolder(file) {
  try {
    const holder = readFileSync(file, 'utf8');
    return lives(holder) ? holder : undefined;
  } catch {
    return undefined;
  }
}

/**
 * Runs `work` while holding the lock, waiting for others to finish theirs.
 * @template T
 * @param {string} file
 * @param {() => Promise<T> | T} work
 * @returns {Promise<T>}
 */
export async function withLock(file, work) {
  for (let tries = 0; ; tries += 1) {
    const lock = tryLock(file);
    if ('release' in lock) {
      try {
        return await work();
      } finally {
        lock.release();
      }
    }
    if (tries > 9000) throw new Error(`process ${Number.parseInt(lock.holder, 10)} holds ${file} for more than fifteen minutes`);
    await pause(100);
  }
}

/**
 * @param {string} file
 * @param {string} me
 */
function releaseLock(file, me) {
  try {
    if (readFileSync(file, 'utf8') === me) rmSync(file);
  } catch {
    // already gone
  }
}
