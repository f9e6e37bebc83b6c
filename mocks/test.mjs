// `npm test`: sets up what is missing, runs every suite (or those named: npm test -- shared api), adds up, and ends with
// the line `N passed, N failed, N skipped`.
import { mkdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { build } from './lib/build.mjs';
import { finish, killGroup, root, runNode, startNode } from './lib/children.mjs';
import { requireChromium, requirePdftotext } from './lib/debian.mjs';
import { explain, Failure } from './lib/failure.mjs';
import { requireNode, requirePackages } from './lib/packages.mjs';
import { readReport } from './lib/reports.mjs';
import { checks, command, suites } from './lib/suites.mjs';
import { testPostgres } from './postgres.mjs';

/** @typedef {import('./lib/reports.mjs').Count} Count */
/** @typedef {{ name: string, count: Count, seconds: number, budget: number }} Result */

const reports = path.join(root, '.data/reports', String(process.pid));
/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();
/** @type {(() => Promise<unknown>)[]} */
const atEnd = [];
/** @type {Record<string, string>} what set-up found out for the suites */
const found = {};
const say = (/** @type {string} */ line) => console.log(`· ${line}`);

/** @type {Map<string, Promise<void>>} */
const done = new Map();
/** @type {Record<import('./lib/suites.mjs').Need, () => Promise<void>>} */
const setUps = {
  api: () => build(say, ['api'], watchOver),
  portal: () => build(say, ['portal'], watchOver),
  chromium: async () => {
    found['CHROMIUM'] = requireChromium(say);
  },
  pdftotext: async () => requirePdftotext(say),
  postgres: async () => {
    const pg = await testPostgres();
    atEnd.push(pg.stop);
    found['TEST_PG'] = JSON.stringify(pg.address);
  },
};

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(signal, () => {
    console.error(`\nStopped by ${signal}.`);
    for (const child of running) killGroup(child, 'SIGKILL');
    void cleanUp().finally(() => process.exit(130));
  });
}

try {
  requireNode();
  const wanted = chosen(process.argv.slice(2).filter((word) => !word.startsWith('-')));
  mkdirSync(reports, { recursive: true });
  await requirePackages(say, watchOver);
  const results = [];
  if (wanted.includes('checks')) results.push(await runChecks());
  for (const suite of suites()) if (wanted.includes(suite.name)) results.push(await runSuite(suite));
  await cleanUp();
  summarize(results);
} catch (error) {
  console.error(explain(error));
  await cleanUp();
  console.log('0 passed, 1 failed, 0 skipped');
  process.exitCode = 1;
}

/** @param {string[]} named */
function chosen(named) {
  const all = ['checks', ...suites().map(({ name }) => name)];
  const unknown = named.find((name) => !all.includes(name));
  if (unknown) throw new Failure(`There is no suite "${unknown}"; there are ${all.join(', ')}.`);
  return named.length > 0 ? named : all.filter((name) => !suites().some((suite) => suite.name === name && suite.apart));
}

/** @param {import('node:child_process').ChildProcess} child */
function watchOver(child) {
  running.add(child);
  child.once('exit', () => running.delete(child));
}

/** Sets one thing up, once. @param {import('./lib/suites.mjs').Need} need */
function setUp(need) {
  const before = done.get(need) ?? setUps[need]();
  done.set(need, before);
  return before;
}

/** @param {import('./lib/suites.mjs').Suite} suite @returns {Promise<Result>} */
async function runSuite(suite) {
  const { name, workspace, budget } = suite;
  console.log(`\n── ${name} ──`);
  const begun = Date.now();
  const seconds = () => (Date.now() - begun) / 1000;
  try {
    for (const need of suite.needs) await setUp(need);
  } catch (error) {
    console.error(explain(error));
    return { name, budget, seconds: seconds(), count: { passed: 0, failed: [`set-up: ${explain(error).split('\n')[0]}`], skipped: [] } };
  }
  const report = path.join(reports, `${name}.json`);
  const jest = suite.runner === 'jest' ? { NODE_OPTIONS: '--experimental-vm-modules --disable-warning=ExperimentalWarning' } : {};
  const plain = process.stdout.isTTY ? {} : { NO_COLOR: '1' };
  const child = startNode(command(suite, report), { cwd: path.join(root, workspace), env: { ...jest, ...found, ...plain, NODE_ENV: 'test' } });
  const { code } = await finish(child, budget * 3000, watchOver);
  killGroup(child, 'SIGKILL'); // whatever a crash left behind
  return { name, budget, seconds: seconds(), count: readReport(report, code, root) };
}

/** Two at a time, since the machine may have but two cores. @returns {Promise<Result>} */
async function runChecks() {
  console.log('\n── checks ──');
  const begun = Date.now();
  /** @type {Count} */
  const count = { passed: 0, failed: [], skipped: [] };
  const waiting = checks();
  const work = async () => {
    for (let check = waiting.shift(); check; check = waiting.shift()) {
      const { name, args, ...where } = check;
      const { code, output, errors } = await runNode(args, { ...where, timeout: 300_000, onStart: watchOver });
      console.log(`${code === 0 ? '✓' : '✗'} ${name}`);
      if (code === 0) count.passed += 1;
      else {
        console.log(`${output}${errors}`.trim());
        count.failed.push(name);
      }
    }
  };
  await Promise.all([work(), work()]);
  return { name: 'checks', count, seconds: (Date.now() - begun) / 1000, budget: 120 };
}

async function cleanUp() {
  for (const act of atEnd.splice(0)) await act().catch((/** @type {unknown} */ error) => console.error(explain(error)));
  rmSync(reports, { recursive: true, force: true });
}

/** @param {Result[]} results */
function summarize(results) {
  console.log('\nSuite      passed  failed  skipped  seconds of budget');
  for (const { name, count, seconds, budget } of results) {
    const figures = [count.passed, count.failed.length, count.skipped.length].map((figure, i) => String(figure).padStart([6, 8, 9][i] ?? 8));
    console.log(`${name.padEnd(11)}${figures.join('')}  ${seconds.toFixed(0).padStart(7)} of ${budget}${seconds > budget ? '  over budget' : ''}`);
  }
  for (const kind of /** @type {const} */ (['skipped', 'failed'])) {
    const names = results.flatMap(({ name, count }) => count[kind].map((test) => `  ${name}: ${test}`));
    if (names.length > 0) console.log(`\n${kind === 'failed' ? 'Failed' : 'Skipped'}:\n${names.join('\n')}`);
  }
  const passed = results.reduce((sum, { count }) => sum + count.passed, 0);
  const failed = results.reduce((sum, { count }) => sum + count.failed.length, 0);
  const skipped = results.reduce((sum, { count }) => sum + count.skipped.length, 0);
  if (failed > 0) process.exitCode = 1;
  console.log(`\n${passed} passed, ${failed} failed, ${skipped} skipped`);
}
