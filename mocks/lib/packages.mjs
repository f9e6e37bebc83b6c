import { existsSync, readFileSync, realpathSync } from 'node:fs';
import path from 'node:path';
import { mustSucceed, root, runNode } from './children.mjs';
import { Failure } from './failure.mjs';
import { withLock } from './lock.mjs';

/** Refuses a Node release that the packages don't support. */
export function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
  if (major < 20 || (major === 20 && minor < 19)) throw new Failure(`Node 20.19 or newer is needed; this is ${process.version}.`);
}

/**
 * The first package that node_modules lacks or has in another version than the lock, if any. npm writes the list of what
 * it installed as the last step of an installation, so a broken one counts as missing.
 * @param {string} [folder]
 */
export function outdatedPackage(folder = root) {
  const installed = path.join(folder, 'node_modules/.package-lock.json');
  if (!existsSync(installed)) return 'node_modules';
  const wanted = packagesOf(path.join(folder, 'package-lock.json'));
  const there = packagesOf(installed);
  return Object.keys(wanted).find((name) => {
    const one = wanted[name];
    if (!name.includes('node_modules/') || !one || (one.optional && !there[name])) return false;
    return there[name]?.version !== one.version;
  });
}

/**
 * @param {string} file
 * @returns {Record<string, { version?: string, optional?: boolean } | undefined>}
 */
const packagesOf = (file) => JSON.parse(readFileSync(file, 'utf8')).packages ?? {};

/**
 * Installs the packages of the lock where they are missing or outdated.
 * @param {(line: string) => void} say
 * @param {(child: import('node:child_process').ChildProcess) => void} [onStart]
 */
export async function requirePackages(say, onStart) {
  if (!existsSync(path.join(root, 'package-lock.json'))) throw new Failure('package-lock.json is missing; this is not a whole checkout.');
  // two installations into one folder break each other
  await withLock(path.join(root, '.data/packages.lock'), async () => {
    const outdated = outdatedPackage();
    if (!outdated) return;
    say(outdated === 'node_modules' ? 'installing packages (about a minute)' : `installing packages (${outdated.split('node_modules/').at(-1)} is not what the lock says)`);
    const args = ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'];
    mustSucceed('npm ci', await runNode([npm(), ...args], { timeout: 15 * 60_000, onStart }));
  });
}

/** npm's program: the one that runs this, or the one beside Node or in PATH. */
function npm() {
  const beside = path.join(path.dirname(realpathSync(process.execPath)), '../lib/node_modules/npm/bin/npm-cli.js');
  const inPath = (process.env['PATH'] ?? '').split(':').map((folder) => path.join(folder, 'npm')).filter((file) => existsSync(file)).map((file) => realpathSync(file));
  const found = [process.env['npm_execpath'] ?? '', beside, ...inPath].find((file) => file.endsWith('npm-cli.js') && existsSync(file));
  if (!found) throw new Failure('npm was not found beside Node; install Node with npm.');
  return found;
}
