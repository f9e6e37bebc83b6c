import { lockHolder, tryLock } from './lock.mjs';
import { explain, Failure } from './failure.mjs';
import { startNode, stopAll } from './children.mjs';

/** @typedef {import('node:child_process').ChildProcess} ChildProcess */

/** Everything one launcher started: stops it as a whole, once, whatever the reason. */
export class House {
  /** @type {Set<ChildProcess>} */
  #passing = new Set();
  /** @type {Map<string, ChildProcess>} */
  #services = new Map();
  /** What the others call while they end. @type {Set<ChildProcess>} */
  #standIns = new Set();
  /** @type {(() => Promise<unknown> | unknown)[]} */
  #last = [];
  /** @type {Promise<void> | undefined} */
  #stopping;
  #begun = Date.now();

  constructor() {
    for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) process.on(signal, () => void this.stop(0));
    // the terminal may be gone already
    for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {});
  }

  get stopping() {
    return this.#stopping !== undefined;
  }

  /** @param {string} line */
  say = (line) => {
    if (!this.stopping) console.log(`${((Date.now() - this.#begun) / 1000).toFixed(1).padStart(6)} s  ${line}`);
  };

  /** Takes the lock of the checkout; refuses when another launcher has it. @param {string} file */
  own(file) {
    const lock = tryLock(file);
    if ('holder' in lock) throw alreadyRunning(lock.holder);
    this.#last.push(lock.release);
    return lock;
  }

  /** What to do after all processes have ended; the last one first. @param {() => Promise<unknown> | unknown} act */
  atEnd(act) {
    this.#last.push(act);
  }

  /** Remembers a program that ends by itself, so that a stop ends it too. @param {ChildProcess} child */
  watchOver = (child) => {
    this.#passing.add(child);
    child.once('exit', () => this.#passing.delete(child));
    if (this.stopping) child.kill('SIGTERM');
  };

  /**
   * Starts a process that has to stay. Its end stops the whole house, unless `mayEnd`.
   * @param {string} name
   * @param {string[]} args of node
   * @param {{ cwd?: string, env?: Record<string, string | undefined>, output?: 'inherit' | 'errors', mayEnd?: boolean, standIn?: boolean }} [options]
   *   standIn: the others call it, so it is stopped after them
   */
  service(name, args, { mayEnd = false, standIn = false, ...options } = {}) {
    const child = startNode(args, options);
    this.#services.set(name, child);
    if (standIn) this.#standIns.add(child);
    child.once('error', (error) => void this.fail(new Failure(`The ${name} could not be started: ${error.message}`)));
    child.once('exit', (code, signal) => {
      if (this.stopping || this.#services.get(name) !== child) return;
      if (mayEnd) console.error(`The ${name} ended (${code ?? signal}); it starts again after the next change.`);
      else void this.fail(new Failure(`The ${name} ended unexpectedly (${code ?? signal}); everything else is being stopped.`));
    });
    if (this.stopping) child.kill('SIGTERM');
    return child;
  }

  /** Ends one service in good order, to start it anew. @param {string} name */
  async endService(name) {
    const child = this.#services.get(name);
    this.#services.delete(name);
    if (child) await stopAll([child]);
  }

  /** @param {unknown} error */
  fail(error) {
    if (!this.stopping) console.error(`\n${explain(error)}`);
    return this.stop(1);
  }

  /** @param {number} code */
  stop(code) {
    this.#stopping ??= this.#stop(code);
    return this.#stopping;
  }

  /** @param {number} code */
  async #stop(code) {
    if (this.#services.size > 0) console.log('\nStopping …');
    const all = [...this.#passing, ...this.#services.values()];
    await stopAll(all.filter((child) => !this.#standIns.has(child)));
    await stopAll([...this.#standIns]);
    for (const act of this.#last.reverse()) {
      try {
        await act();
      } catch (error) {
        console.error(explain(error));
        code ||= 1;
      }
    }
    process.exit(code);
  }
}

/** @param {string} holder */
const alreadyRunning = (holder) => {
  const pid = Number.parseInt(holder, 10);
  return new Failure(`Tallypole already runs from this folder as process ${pid}. Stop it first (Ctrl-C there, or: kill ${pid}).`);
};

/** Refuses while a launcher runs. @param {string} file its lock */
export function refuseWhileRunning(file) {
  const holder = lockHolder(file);
  if (holder) throw alreadyRunning(holder);
}
