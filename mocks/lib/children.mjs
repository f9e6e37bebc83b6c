import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { Failure } from './failure.mjs';

const leave = new URL('./leave-with-parent.mjs', import.meta.url).href;
export const root = fileURLToPath(new URL('../../', import.meta.url));

/** The caller's environment without what npm and Node tools left there: it would leak into the programs started here. */
export const cleanEnv = Object.fromEntries(Object.entries(process.env).filter(([name]) => !/^(npm_.*|NODE_ENV|NODE_OPTIONS|INIT_CWD)$/i.test(name)));

/**
 * Starts a Node program that leaves when this process is gone, however it went. It has its own process group, so a Ctrl-C
 * in the terminal reaches this process alone.
 * @param {string[]} args of node
 * @param {{ cwd?: string, env?: Record<string, string | undefined>, output?: 'inherit' | 'errors' | 'pipe' | 'ignore' }} [options] output:
 *   where what it says goes; `errors` passes on only those
 */
export function startNode(args, { cwd = root, env = {}, output = 'inherit' } = {}) {
  return spawn(process.execPath, ['--import', leave, ...args], {
    cwd,
    env: { ...cleanEnv, ...env, LEAVE_WITH_PARENT: 'yes' },
    detached: true,
    stdio: ['ignore', output === 'errors' ? 'ignore' : output, output === 'errors' ? 'inherit' : output, 'ipc'],
  });
}

/**
 * Runs a Node program to its end.
 * @param {string[]} args of node
 * @param {{ cwd?: string, env?: Record<string, string | undefined>, timeout?: number, onStart?: (child: import('node:child_process').ChildProcess) => void }} [options]
 * @returns {Promise<{ code: number | string, output: string, errors: string }>} code: exit status, or the signal's name
 */
export function runNode(args, { cwd, env, timeout, onStart } = {}) {
  return finish(startNode(args, { cwd, env: { NO_COLOR: '1', ...env }, output: 'pipe' }), timeout, onStart);
}

/**
 * @param {import('node:child_process').ChildProcess} child
 * @param {number} [timeout] milliseconds until its whole group is killed
 * @param {(child: import('node:child_process').ChildProcess) => void} [onStart]
 * @returns {Promise<{ code: number | string, output: string, errors: string }>}
 */
export function finish(child, timeout, onStart) {
  onStart?.(child);
  return new Promise((resolve, reject) => {
    let output = '';
    let errors = '';
    let late = false;
    child.stdout?.on('data', (chunk) => (output += chunk));
    child.stderr?.on('data', (chunk) => (errors += chunk));
    const bomb = timeout ? setTimeout(() => { late = true; killGroup(child, 'SIGKILL'); }, timeout) : undefined;
    child.once('error', reject);
    child.once('close', (code, signal) => {
      clearTimeout(bomb);
      resolve({ code: late ? `no end after ${Math.round((timeout ?? 0) / 1000)} s` : (code ?? signal ?? 'unknown'), output, errors });
    });
  });
}

/**
 * Signals a child started here together with what it started; nothing else.
 * @param {import('node:child_process').ChildProcess} child
 * @param {NodeJS.Signals} signal
 */
export function killGroup(child, signal) {
  if (!child.pid) return;
  try {
    process.kill(-child.pid, signal);
  } catch {
    // the whole group is gone
  }
}

/**
 * Asks children to end and kills those that don't within `patience` ms.
 * @param {import('node:child_process').ChildProcess[]} children
 * @param {number} [patience]
 */
export async function stopAll(children, patience = 8000) {
  await Promise.all(
    children.map(
      (child) =>
        new Promise((resolve) => {
          if (child.exitCode !== null || child.signalCode !== null || !child.pid) return resolve(undefined);
          const bomb = setTimeout(() => killGroup(child, 'SIGKILL'), patience);
          child.once('exit', () => {
            clearTimeout(bomb);
            killGroup(child, 'SIGKILL'); // what it may have left behind
            resolve(undefined);
          });
          child.kill('SIGTERM');
        }),
    ),
  );
}

/**
 * @param {string} what for the message
 * @param {{ code: number | string, output: string, errors: string }} done
 */
export function mustSucceed(what, done) {
  if (done.code === 0) return;
  const said = (done.errors.trim() || done.output.trim()).split('\n').slice(-12).join('\n');
  throw new Failure(said.includes('\n') ? `${what} failed (${done.code}):\n${said}` : `${what} failed: ${said || done.code}`);
}
