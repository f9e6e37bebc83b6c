import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, readdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { Failure } from './failure.mjs';

export const isRoot = process.getuid?.() === 0;

/** PostgreSQL releases that roles.sql and the migrations are written for. */
const oldestPostgres = 15;

/**
 * The folder of PostgreSQL's programs: PG_BIN, Debian's newest release, or what pg_config says.
 * @param {string} [wanted] PG_BIN
 */
export function findPostgres(wanted) {
  if (wanted) {
    if (existsSync(path.join(wanted, 'initdb'))) return wanted;
    throw new Failure(`PG_BIN is ${wanted}, but there is no initdb in it.`);
  }
  const root = '/usr/lib/postgresql';
  const releases = existsSync(root) ? readdirSync(root).map(Number).filter((release) => release >= oldestPostgres) : [];
  const found = releases.sort((a, b) => b - a).map((release) => `${root}/${release}/bin`);
  const told = spawnSync('pg_config', ['--bindir'], { encoding: 'utf8' }).stdout?.trim();
  if (told) found.push(told);
  // pg_config may come with the client alone
  return found.find((folder) => ['initdb', 'pg_ctl', 'postgres', 'psql'].every((name) => existsSync(path.join(folder, name))));
}

/**
 * @param {string} [wanted] PG_BIN
 * @param {(line: string) => void} [say]
 * @returns {string} the folder of PostgreSQL's programs, installed from Debian where missing
 */
export function requirePostgres(wanted, say = () => {}) {
  const found = findPostgres(wanted);
  if (found) return found;
  const hint = `PostgreSQL ${oldestPostgres} or newer is missing. Install it once as root (apt-get install postgresql) or set PG_BIN to the folder of its programs.`;
  if (!isRoot || !existsSync('/usr/bin/apt-get')) throw new Failure(hint);
  // Debian's package would otherwise make and start a cluster of its own on port 5432
  const config = '/etc/postgresql-common/createcluster.conf';
  mkdirSync(path.dirname(config), { recursive: true });
  const before = existsSync(config) ? readFileSync(config, 'utf8') : '';
  if (!/^\s*create_main_cluster\s*=/m.test(before)) writeFileSync(config, `${before}create_main_cluster = false\n`);
  installPackages(['postgresql'], say);
  const installed = findPostgres();
  if (!installed) throw new Failure(`${hint} (Debian's package was installed, but it is older.)`);
  return installed;
}

/**
 * Debian's Chromium, which the browser tests need.
 * @param {(line: string) => void} say
 * @returns {string} path of the browser
 */
export function requireChromium(say) {
  const wanted = process.env['CHROMIUM'];
  if (wanted && !existsSync(wanted)) throw new Failure(`CHROMIUM is ${wanted}, but there is no such file.`);
  const browser = wanted ?? ['/usr/bin/chromium', '/usr/bin/google-chrome'].find((file) => existsSync(file));
  if (browser) return browser;
  requireProgram('/usr/bin/chromium', 'chromium', 'The browser tests', say, ', or set CHROMIUM to a browser');
  return '/usr/bin/chromium';
}

/**
 * Debian's pdftotext, by which tests read papers as a person would.
 * @param {(line: string) => void} say
 */
export function requirePdftotext(say) {
  requireProgram('/usr/bin/pdftotext', 'poppler-utils', 'The tests that read papers', say);
}

/**
 * @param {string} file the program
 * @param {string} name Debian's package
 * @param {string} who needs it
 * @param {(line: string) => void} say
 * @param {string} [otherwise]
 */
function requireProgram(file, name, who, say, otherwise = '') {
  if (existsSync(file)) return;
  const hint = `${who} need ${name}: install it once as root (apt-get install ${name})${otherwise}.`;
  if (!isRoot || !existsSync('/usr/bin/apt-get')) throw new Failure(hint);
  installPackages([name], say);
  if (!existsSync(file)) throw new Failure(hint);
}

/**
 * @param {string[]} packages
 * @param {(line: string) => void} say
 */
function installPackages(packages, say) {
  say(`installing ${packages.join(' and ')} from the Debian archive`);
  const options = { encoding: /** @type {const} */ ('utf8'), env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' } };
  const install = ['install', '-y', '-qq', '--no-install-recommends', '-o', 'Dpkg::Options::=--force-confold', ...packages];
  for (const args of [['update', '-qq'], install]) {
    const done = spawnSync('apt-get', args, options);
    if (done.status === 0) continue;
    const last = `${done.stderr ?? ''}`.trim().split('\n').at(-1) ?? '';
    throw new Failure(`apt-get ${args[0]} failed while installing ${packages.join(' and ')}: ${last || (done.error?.message ?? done.status)}`);
  }
}
