import { existsSync, readFileSync } from 'node:fs';

/**
 * @typedef {{ passed: number, failed: string[], skipped: string[] }} Count failed and skipped by name
 * @typedef {{ status: string, fullName?: string, title?: string, failureMessages?: string[] }} Assertion
 * @typedef {{ name?: string, status?: string, message?: string, assertionResults?: Assertion[] }} FileResult
 */

/**
 * Counts a JSON report of Jest or Vitest, whose shapes agree. Whatever cannot be a pass is a failure: no report, no test at
 * all, a file that could not be loaded, and a bad exit status without a failed test.
 * @param {string} file
 * @param {number | string} code exit status, or why there is none
 * @param {string} root taken off the front of file names
 * @returns {Count}
 */
export function readReport(file, code, root) {
  const report = parse(file);
  if (!report) return { passed: 0, failed: [`no report was written (${code})`], skipped: [] };
  /** @type {Count} */
  const count = { passed: 0, failed: [], skipped: [] };
  for (const one of report) addFile(count, one, root);
  if (count.passed + count.failed.length + count.skipped.length === 0) count.failed.push('no test was run');
  if (code !== 0 && count.failed.length === 0) count.failed.push(`ended with ${code} although no test failed`);
  return count;
}

/**
 * @param {string} file
 * @returns {FileResult[] | undefined}
 */
function parse(file) {
  if (!existsSync(file)) return undefined;
  try {
    const { testResults } = JSON.parse(readFileSync(file, 'utf8'));
    return Array.isArray(testResults) ? testResults : undefined;
  } catch {
    return undefined; // cut off while it was written
  }
}

/**
 * @param {Count} count
 * @param {FileResult} result
 * @param {string} root
 */
function addFile(count, result, root) {
  const file = (result.name ?? 'unknown file').replace(root, '');
  const tests = result.assertionResults ?? [];
  for (const test of tests) {
    const name = `${file} › ${(test.fullName ?? test.title ?? '').trim()}`;
    if (test.status === 'passed') count.passed += 1;
    else if (['pending', 'skipped', 'todo', 'disabled'].includes(test.status)) count.skipped.push(name);
    else count.failed.push(name);
  }
  const broken = result.status === 'failed' && !tests.some(({ status }) => status === 'failed');
  if (broken) count.failed.push(`${file} could not be run`);
}
