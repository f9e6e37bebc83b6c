import { readFileSync } from 'node:fs';
import { codeOf } from './failure.mjs';

/**
 * Identity of a process that survives the reuse of its number: the number and the moment it started (in clock ticks
 * since boot, from Linux's /proc). Undefined when no such process lives; a zombie does not.
 * @param {number} pid
 */
export function identity(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // the second field is the command in parentheses and may hold spaces
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
    return fields[0] === 'Z' || fields[0] === 'X' ? undefined : `${pid}-${fields[19]}`;
  } catch {
    return signalable(pid) ? `${pid}-0` : undefined;
  }
}

/** @param {string} id as `identity` gave it */
export const lives = (id) => identity(Number.parseInt(id, 10)) === id;

/** @param {number} pid */
function signalable(pid) {
  try {
    process.kill(pid, 0);
    // where /proc exists and does not know the process, it ended between the two questions
    return !readable('/proc/self/stat');
  } catch (error) {
    return codeOf(error) === 'EPERM' && !readable('/proc/self/stat');
  }
}

/** @param {string} file */
function readable(file) {
  try {
    return readFileSync(file).length > 0;
  } catch {
    return false;
  }
}

/** @param {number} ms */
export const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));
