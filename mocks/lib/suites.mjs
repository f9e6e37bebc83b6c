import { existsSync } from 'node:fs';
import path from 'node:path';
import { tsc } from './build.mjs';
import { root } from './children.mjs';

const module = (/** @type {string} */ name) => path.join(root, 'node_modules', name);

/** What a suite needs before it can run; test.mjs sets these up once each. @typedef {'api' | 'portal' | 'postgres' | 'chromium' | 'pdftotext'} Need */

/**
 * Static checks, each counting as one test.
 * @returns {{ name: string, args: string[], cwd?: string }[]}
 */
export function checks() {
  const typed = ['shared', 'mocks', 'api', 'portal'].filter((name) => existsSync(path.join(root, name, 'tsconfig.json')));
  return [
    ...typed.map((name) => ({ name: `types of ${name}`, args: [tsc, '-p', '.'], cwd: path.join(root, name) })),
    { name: 'lint', args: [module('eslint/bin/eslint.js'), '.'] },
    { name: 'directions between folders', args: [module('dependency-cruiser/bin/dependency-cruise.mjs'), '--output-type', 'err', 'shared/src', 'api/src', 'portal/src', 'portal/e2e', 'mocks'] },
    { name: 'unused code and packages', args: [module('knip/bin/knip.js'), '--no-progress'] },
  ];
}

/**
 * @typedef {object} Suite
 * @property {string} name
 * @property {'vitest' | 'jest'} runner
 * @property {string} workspace
 * @property {string} [config] of the runner, when it is not the usual one
 * @property {number} budget seconds; three times as many end it
 * @property {Need[]} needs
 * @property {boolean} [apart] runs only when it is named
 */

/** @returns {Suite[]} in the order they run */
export function suites() {
  /** @type {Suite[]} */
  const all = [
    { name: 'shared', runner: 'vitest', workspace: 'shared', budget: 60, needs: [] },
    { name: 'portal', runner: 'vitest', workspace: 'portal', budget: 60, needs: [] },
    { name: 'mocks', runner: 'jest', workspace: 'mocks', budget: 120, needs: ['api', 'portal'] },
    { name: 'api', runner: 'jest', workspace: 'api', budget: 300, needs: ['api', 'postgres', 'pdftotext'] },
    { name: 'faults', runner: 'jest', workspace: 'api', config: 'jest.faults.config.mjs', budget: 240, needs: ['api', 'postgres'] },
    { name: 'browser', runner: 'vitest', workspace: 'portal', config: 'vitest.e2e.config.ts', budget: 360, needs: ['api', 'portal', 'postgres', 'chromium'] },
    { name: 'bench', runner: 'jest', workspace: 'api', config: 'jest.bench.config.mjs', budget: 600, needs: ['api', 'postgres'], apart: true },
    { name: 'lighthouse', runner: 'vitest', workspace: 'portal', config: 'vitest.lighthouse.config.ts', budget: 300, needs: ['api', 'portal', 'postgres', 'chromium'], apart: true },
  ];
  return all.filter(({ name, workspace, config }) => name !== 'faults' || existsSync(path.join(root, workspace, config ?? '')));
}

/**
 * @param {Suite} suite
 * @param {string} report file for the runner's JSON
 * @returns {string[]} arguments of node
 */
export function command({ runner, config }, report) {
  const which = config ? ['--config', config] : [];
  return runner === 'vitest'
    ? [module('vitest/vitest.mjs'), 'run', ...which, '--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
    : [module('jest/bin/jest.js'), ...which, '--json', `--outputFile=${report}`];
}
