import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { mustSucceed, root, runNode } from './children.mjs';
import { withLock } from './lock.mjs';

export const tsc = path.join(root, 'node_modules/typescript/bin/tsc');
export const vite = path.join(root, 'node_modules/vite/bin/vite.js');

/** What each build reads and the file that shows that its result is there. */
const builds = {
  api: {
    sources: ['shared/src', 'shared/package.json', 'shared/tsconfig.build.json', 'api/src', 'api/package.json', 'api/tsconfig.build.json', 'tsconfig.base.json', 'package-lock.json'],
    result: 'api/dist/web.js',
  },
  portal: {
    sources: ['shared/src', 'shared/package.json', 'portal', 'tsconfig.base.json', 'package-lock.json'],
    result: 'portal/dist/index.html',
  },
};

/** Folders and files in the sources that no build reads. */
const unread = /^(node_modules|dist|test|e2e|coverage|\.vite)$|\.(spec|test)\.tsx?$/;

/**
 * Hash over the names and contents of files.
 * @param {string[]} sources relative to the repository
 */
function fingerprint(sources) {
  const hash = createHash('sha256').update(process.version);
  /** @param {string} file */
  const visit = (file) => {
    if (!existsSync(file)) return;
    if (!statSync(file).isDirectory()) {
      hash.update(`\0${path.relative(root, file)}\0`).update(readFileSync(file));
      return;
    }
    for (const name of readdirSync(file).sort()) if (!unread.test(name)) visit(path.join(file, name));
  };
  for (const source of sources) visit(path.join(root, source));
  return hash.digest('hex');
}

/**
 * Builds what changed since the last time; stamps in .data remember.
 * @param {(line: string) => void} say
 * @param {(keyof typeof builds)[]} [which]
 * @param {(child: import('node:child_process').ChildProcess) => void} [onStart]
 */
export async function build(say, which = ['api', 'portal'], onStart) {
  await withLock(path.join(root, '.data/build.lock'), async () => {
    const results = await Promise.allSettled(which.map((name) => buildOne(name, say, onStart)));
    for (const result of results) if (result.status === 'rejected') throw result.reason;
  });
}

/**
 * @param {keyof typeof builds} name
 * @param {(line: string) => void} say
 * @param {(child: import('node:child_process').ChildProcess) => void} [onStart]
 */
async function buildOne(name, say, onStart) {
  const { sources, result } = builds[name];
  const stamp = path.join(root, '.data/stamps', name);
  const now = fingerprint(sources);
  if (existsSync(path.join(root, result)) && existsSync(stamp) && readFileSync(stamp, 'utf8') === now) return;
  rmSync(stamp, { force: true });
  say(`building ${name}`);
  if (name === 'api') {
    for (const workspace of ['shared', 'api']) removeOrphans(path.join(root, workspace, 'src'), path.join(root, workspace, 'dist'));
    mustSucceed('Building api', await runNode([tsc, '-b', 'api/tsconfig.build.json'], { onStart }));
  } else {
    mustSucceed('Building portal', await runNode([vite, 'build', '--logLevel', 'warn'], { cwd: path.join(root, 'portal'), onStart }));
  }
  mkdirSync(path.dirname(stamp), { recursive: true });
  writeFileSync(stamp, now);
}

/**
 * Removes built files whose source is gone: tsc leaves them, and a migration that was renamed would run twice.
 * @param {string} src
 * @param {string} dist
 */
export function removeOrphans(src, dist) {
  if (!existsSync(dist)) return;
  for (const entry of readdirSync(dist, { withFileTypes: true })) {
    const built = path.join(dist, entry.name);
    if (entry.isDirectory()) {
      removeOrphans(path.join(src, entry.name), built);
      continue;
    }
    const stem = /^(.+?)(\.d\.ts|\.js)(\.map)?$/.exec(entry.name)?.[1];
    if (stem && !['.ts', '.tsx'].some((ending) => existsSync(path.join(src, stem + ending)))) rmSync(built);
  }
}
