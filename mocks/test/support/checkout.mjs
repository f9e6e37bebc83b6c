import { cpSync, existsSync, mkdirSync, readdirSync, rmSync, symlinkSync } from 'node:fs';
import path from 'node:path';
import { build } from '../../lib/build.mjs';
import { root } from '../../lib/children.mjs';

const parts = ['shared', 'mocks', 'api', 'portal', '.data/stamps', 'package.json', 'package-lock.json', 'tsconfig.base.json', '.env.example'];

/**
 * A checkout of its own in `folder`: today's sources and builds, and links to the installed packages. Links, so that
 * nothing done in the copy can reach the packages themselves.
 * @param {string} folder
 */
export async function copyCheckout(folder) {
  await build(() => {});
  const ignored = new Set(['node_modules', 'coverage']);
  for (const part of parts) {
    cpSync(path.join(root, part), path.join(folder, part), { recursive: true, filter: (file) => !ignored.has(path.basename(file)) });
  }
  for (const workspace of ['.', 'shared', 'mocks', 'api', 'portal']) linkPackages(path.join(root, workspace), path.join(folder, workspace));
  const own = path.join(folder, 'node_modules/@tallypole');
  rmSync(own);
  mkdirSync(own);
  for (const workspace of ['shared', 'mocks', 'api', 'portal']) symlinkSync(path.join(folder, workspace), path.join(own, workspace));
}

/**
 * @param {string} from
 * @param {string} to
 */
function linkPackages(from, to) {
  const packages = path.join(from, 'node_modules');
  if (!existsSync(packages)) return;
  mkdirSync(path.join(to, 'node_modules'));
  for (const name of readdirSync(packages)) if (!name.startsWith('.vite')) symlinkSync(path.join(packages, name), path.join(to, 'node_modules', name));
}
