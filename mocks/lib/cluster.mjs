import { spawnSync } from 'node:child_process';
import { createHash, randomBytes } from 'node:crypto';
import { chmodSync, chownSync, existsSync, mkdirSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { isRoot } from './debian.mjs';
import { Failure } from './failure.mjs';
import { freePort, isFree } from './ports.mjs';
import { lives, pause } from './processes.mjs';

/** Login roles besides the superuser; the variable names are those of roles.sql. */
export const roles = /** @type {const} */ ({
  tally_owner: 'owner_password',
  app_read: 'read_password',
  app_write: 'write_password',
  app_worker: 'worker_password',
  queue_owner: 'queue_password',
});

/** @typedef {Record<string, string>} Passwords by role, `postgres` being the superuser */

/**
 * A PostgreSQL cluster in a folder: makes it, starts and stops the server. As root the server runs as Debian's user
 * `postgres`, which PostgreSQL insists on; otherwise as the caller.
 */
export class Cluster {
  /**
   * @param {string} bin folder of PostgreSQL's programs
   * @param {string} base folder of the cluster, see clusterFolder
   * @param {boolean} durable false for a cluster of tests: a power cut may lose it
   */
  constructor(bin, base, durable) {
    this.bin = bin;
    this.base = base;
    this.durable = durable;
    this.data = path.join(base, 'data');
    this.log = path.join(base, 'server.log');
    this.holders = path.join(base, 'holders');
    this.lock = path.join(base, 'lock');
  }

  /** Makes the folder where missing. */
  claimFolder() {
    try {
      mkdirSync(this.holders, { recursive: true });
      if (isRoot) {
        const { uid, gid } = systemUser();
        chownSync(this.base, uid, gid);
      }
      chmodSync(this.base, 0o700);
    } catch (error) {
      throw new Failure(`The database folder ${this.base} belongs to another user: remove it as that user, or start as that user. (${/** @type {Error} */ (error).message})`);
    }
  }

  /** Makes the cluster where missing. @returns {Passwords} */
  prepare() {
    const file = path.join(this.base, 'passwords.json');
    if (existsSync(path.join(this.data, 'global', 'pg_control')) && existsSync(file)) return JSON.parse(readFileSync(file, 'utf8'));
    if (existsSync(file)) rmSync(this.data, { recursive: true, force: true }); // an initdb that was cut off
    if (existsSync(this.data)) throw new Failure(`The database folder ${this.base} has data but no passwords.json; put that file back, or move the folder away.`);
    /** @type {Passwords} */
    const passwords = {};
    for (const role of ['postgres', ...Object.keys(roles)]) passwords[role] = randomBytes(24).toString('base64url');
    writeFileSync(file, JSON.stringify(passwords), { mode: 0o600 });
    const first = path.join(this.base, 'first-password');
    writeFileSync(first, `${passwords['postgres']}\n`, { mode: 0o600 });
    if (isRoot) chownSync(first, systemUser().uid, systemUser().gid);
    const safety = this.durable ? ['--data-checksums'] : ['--no-sync'];
    const made = this.asOwner('initdb', ['-D', this.data, '-U', 'postgres', '-E', 'UTF8', '--locale=C.UTF-8', '--auth=scram-sha-256', `--pwfile=${first}`, ...safety]);
    rmSync(first);
    if (made.status !== 0) throw new Failure(`PostgreSQL's initdb failed in ${this.base}: ${lastLine(made.stderr)}`);
    return passwords;
  }

  /** The postmaster's number and port as its own file has them; it may be gone all the same. */
  postmaster() {
    try {
      const lines = readFileSync(path.join(this.data, 'postmaster.pid'), 'utf8').split('\n');
      return { pid: Number(lines[0]), port: Number(lines[3]) };
    } catch {
      return undefined;
    }
  }

  /** The port if a server answers. A server that is just starting, or was just killed, is waited for. */
  async answering() {
    for (let tries = 0; tries < 300; tries += 1) {
      const server = this.postmaster();
      if (!server || !this.isPostmaster(server.pid)) return undefined;
      if (server.port && this.#ready(server.port)) return server.port;
      await pause(100);
    }
    return undefined;
  }

  /**
   * A number in postmaster.pid may since belong to something else, and a killed postmaster can stay a zombie for a while:
   * so it must be a living process whose working folder is the data folder.
   * @param {number} pid
   */
  isPostmaster(pid) {
    try {
      return statSync(`/proc/${pid}/cwd/postmaster.pid`).ino === statSync(path.join(this.data, 'postmaster.pid')).ino;
    } catch {
      return false;
    }
  }

  /** @param {number} port */
  #ready(port) {
    return spawnSync(path.join(this.bin, 'pg_isready'), ['-q', '-h', '127.0.0.1', '-p', String(port)]).status === 0;
  }

  /** Starts the server on the remembered port, or on another one when that is taken. @param {number} [wanted] */
  async start(wanted) {
    const file = path.join(this.base, 'port');
    const remembered = existsSync(file) ? Number(readFileSync(file, 'utf8')) : 0;
    for (let tries = 0; ; tries += 1) {
      const usable = wanted ?? (remembered && tries < 5 && (await isFree(remembered)) ? remembered : await freePort());
      const started = this.asOwner('pg_ctl', ['start', '-w', '-t', '60', '-s', '-D', this.data, '-l', this.log, '-o', this.#options(usable)], {
        stdio: 'ignore', // the server inherits it; a pipe would never end
      });
      if (started.status === 0) {
        writeFileSync(file, String(usable));
        return usable;
      }
      // another process took the port in between, or processes of a killed server still hold its memory
      const why = lastLine(existsSync(this.log) ? readFileSync(this.log, 'utf8').split('\n').filter((line) => /FATAL|HINT|PANIC/.test(line)).join('\n') : '');
      if (tries >= 8) throw new Failure(`PostgreSQL did not start (log in ${this.log}): ${why}`);
      await pause(300);
    }
  }

  /** @param {number} port */
  #options(port) {
    const safe = this.durable ? 'on' : 'off';
    const settings = {
      listen_addresses: '127.0.0.1',
      unix_socket_directories: "''", // a socket's path is limited to 107 bytes, and nothing here needs one
      max_connections: 100,
      timezone: 'UTC',
      log_timezone: 'UTC',
      fsync: safe,
      synchronous_commit: safe,
      full_page_writes: safe,
    };
    return [`-p ${port}`, ...Object.entries(settings).map(([name, value]) => `-c ${name}=${value}`)].join(' ');
  }

  /** @param {'smart' | 'fast' | 'immediate'} mode */
  stop(mode) {
    if (!this.postmaster()) return;
    this.asOwner('pg_ctl', ['stop', '-m', mode, '-w', '-s', '-t', '60', '-D', this.data], { stdio: 'ignore' });
  }

  /** Names one that needs the server. @param {string} id as `identity` gives it, with a number of its own behind a dot */
  hold(id) {
    writeFileSync(path.join(this.holders, id), '');
  }

  /** @param {string} id @returns {boolean} whether nobody else needs the server */
  letGo(id) {
    rmSync(path.join(this.holders, id), { force: true });
    const others = existsSync(this.holders) ? readdirSync(this.holders) : [];
    for (const gone of others.filter((other) => !holderLives(other))) rmSync(path.join(this.holders, gone), { force: true });
    return !others.some(holderLives);
  }

  /**
   * @param {string} program
   * @param {string[]} args
   * @param {import('node:child_process').SpawnSyncOptions} [options]
   */
  asOwner(program, args, options = {}) {
    return runAsOwner(path.join(this.bin, program), args, options);
  }
}

/**
 * Runs a program as the user who owns clusters. In /, since the caller's folder may be closed to that user.
 * @param {string} program
 * @param {string[]} args
 * @param {import('node:child_process').SpawnSyncOptions} [options]
 */
function runAsOwner(program, args, options = {}) {
  const all = /** @type {import('node:child_process').SpawnSyncOptionsWithStringEncoding} */ ({ cwd: '/', encoding: 'utf8', ...options });
  return isRoot ? spawnSync('runuser', ['-u', 'postgres', '--', program, ...args], all) : spawnSync(program, args, all);
}

/** @returns {{ uid: number, gid: number }} Debian's user for the server */
function systemUser() {
  const line = readFileSync('/etc/passwd', 'utf8').split('\n').find((one) => one.startsWith('postgres:'));
  if (!line) throw new Failure('PostgreSQL refuses to run as root and there is no user "postgres". Start as another user.');
  const [, , uid, gid] = line.split(':');
  return { uid: Number(uid), gid: Number(gid) };
}

/**
 * Where a cluster wanted in `dir` really lives: there, or under /var/lib/postgresql when the checkout lies in a folder
 * that is closed to the server's user (such as /root).
 * @param {string} dir
 */
export function clusterFolder(dir) {
  const wanted = path.resolve(dir);
  if (!isRoot) return wanted;
  let parent = path.dirname(wanted);
  while (!existsSync(parent)) parent = path.dirname(parent);
  if (runAsOwner('/usr/bin/test', ['-x', parent]).status === 0) return wanted;
  return `/var/lib/postgresql/tallypole-${createHash('sha256').update(wanted).digest('hex').slice(0, 12)}`;
}

/** @param {string} id as `hold` got it */
export const holderLives = (id) => lives(id.split('.')[0] ?? '');

/** @param {unknown} text */
const lastLine = (text) => String(text ?? '').trim().split('\n').at(-1) ?? '';
