import { spawn, type ChildProcess } from 'node:child_process';
import { closeSync, mkdtempSync, openSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { connect } from '../../../mocks/postgres.mjs';
import { MailSink } from './mail-sink.ts';

const api = path.join(import.meta.dirname, '../..');
let made = 0;
type Connection = ReturnType<typeof connect>;

export interface ProcessOptions {
  env?: Record<string, string>;
  /** A module that is loaded before the server: how a test kills a process at a chosen moment. */
  preload?: string;
  /** A file for what the process logs. */
  logTo?: string;
  /** Waits only until the process lives, ready or not. */
  alive?: boolean;
}

export interface WebProcess {
  url: string;
  child: ChildProcess;
}

/** A database of its own, a mail server, and as many built web and worker processes as a test asks for. */
export class House {
  readonly mail = new MailSink();
  readonly env: Record<string, string>;
  readonly database: string;
  /** For files of this house; gone with it. */
  readonly folder = mkdtempSync(path.join(tmpdir(), 'tally-test-'));
  private readonly children: ChildProcess[] = [];
  private owner: Promise<pg.Client> | undefined;

  private constructor(private readonly server: Connection, template: string) {
    made += 1;
    this.database = `t_${process.pid}_${made}`;
    this.server.createDatabase(this.database, template);
    this.env = {
      PATH: process.env['PATH'] ?? '',
      NODE_ENV: 'test',
      PUBLIC_URL: 'http://127.0.0.1',
      DATABASE_WRITE_URL: this.server.url('app_write', this.database),
      DATABASE_READ_URL: this.server.url('app_read', this.database),
      DATABASE_WORKER_URL: this.server.url('app_worker', this.database),
      QUEUE_URL: this.server.url('queue_owner', this.database),
      DATABASE_POOL: process.env['TEST_POOL'] ?? '4',
      JWT_SECRET: 'j'.repeat(40),
      CODE_SECRET: 'c'.repeat(40),
      SECOND_FACTOR_KEYS: `k1:${'k'.repeat(43)}`,
      STRIPE_SECRET_KEY: 'sk_test_demo_house',
      STRIPE_WEBHOOK_SECRET: 'whsec_demo_house',
      MAIL_FROM: 'tally@house.example',
      FILES_DIR: path.join(this.folder, 'files'),
      LOG_LEVEL: 'error',
    };
  }

  /** On the server of the tests, or on one of its own. */
  static async open(env: Record<string, string> = {}, own?: { server: Connection; template: string }): Promise<House> {
    const { server, template } = own ?? { server: connect(JSON.parse(process.env['TEST_PG'] ?? '{}') as Parameters<typeof connect>[0]), template: process.env['TEST_TEMPLATE'] ?? '' };
    const house = new House(server, template);
    await house.mail.start();
    Object.assign(house.env, { SMTP_URL: `smtp://127.0.0.1:${house.mail.port}` }, env);
    return house;
  }

  /** Starts a web process and waits until it answers. */
  async web(options: ProcessOptions = {}): Promise<WebProcess> {
    const port = await freePort();
    const url = `http://127.0.0.1:${port}`;
    const child = this.spawn('dist/web.js', { ...options, env: { PORT: String(port), PUBLIC_URL: url, ...options.env } });
    await until(async () => {
      if (child.exitCode !== null) throw new Error(`The web process ended with ${child.exitCode}.`);
      return await fetch(`${url}/api/health${options.alive ? '' : '/ready'}`).then((answer) => answer.ok, () => false);
    }, 'the web process', 50_000);
    return { url, child };
  }

  async worker(options: ProcessOptions = {}): Promise<ChildProcess> {
    const child = this.spawn('dist/worker.js', options);
    await new Promise<void>((ready, fail) => {
      child.once('message', () => ready());
      child.once('exit', (code) => fail(new Error(`The worker ended with ${code}.`)));
    });
    return child;
  }

  get postgresBin(): string {
    return this.server.address.bin;
  }

  get ownerUrl(): string {
    return this.server.url('tally_owner', this.database);
  }

  /** Runs SQL as the owner, who sees everything. */
  async sql<T extends pg.QueryResultRow>(text: string, values: unknown[] = []): Promise<T[]> {
    this.owner ??= connected(this.ownerUrl).then((client) => client.on('error', () => (this.owner = undefined)));
    return (await (await this.owner).query<T>(text, values)).rows;
  }

  /** Runs a statement as one of the runtime roles on a connection of its own. */
  async as<T extends pg.QueryResultRow>(role: 'app_read' | 'app_write' | 'app_worker', work: (client: pg.Client) => Promise<T[]>): Promise<T[]> {
    const client = await connected(this.server.url(role, this.database));
    try {
      return await work(client);
    } finally {
      await client.end();
    }
  }

  /** Runs SQL as the owner of the queue's schema. */
  async asQueueOwner(text: string): Promise<pg.QueryResultRow[]> {
    const client = await connected(this.server.url('queue_owner', this.database));
    return (await client.query(text).finally(() => client.end())).rows as pg.QueryResultRow[];
  }

  /** Ends all connections of a role, and lets it make new ones or not. */
  disconnect(role: 'app_read' | 'app_write' | 'app_worker' | 'queue_owner', letBack: boolean): void {
    this.server.psql(
      'postgres',
      `${letBack ? 'grant' : 'revoke'} connect on database :"name" ${letBack ? 'to' : 'from'} :"role"; select pg_terminate_backend(pid) from pg_stat_activity where usename = :'role' and datname = :'name'`,
      { name: this.database, role },
    );
  }

  /** Runs SQL as somebody for whom no rule holds. */
  asSuper(sql: string): void {
    this.server.psql(this.database, sql);
  }

  async kill(child: ChildProcess, signal: NodeJS.Signals = 'SIGKILL'): Promise<void> {
    if (child.exitCode !== null || child.signalCode !== null) return;
    const gone = new Promise((done) => child.once('exit', done));
    child.kill(signal);
    await gone;
  }

  async close(): Promise<void> {
    await Promise.all(this.children.map((child) => this.kill(child)));
    await this.mail.stop();
    await (await this.owner)?.end();
    this.server.dropDatabase(this.database);
    rmSync(this.folder, { recursive: true, force: true });
  }

  private spawn(script: string, { env, preload, logTo }: ProcessOptions): ChildProcess {
    const args = [...(preload ? ['--import', preload] : []), script];
    const log = logTo === undefined ? 'inherit' : openSync(logTo, 'a');
    const child = spawn(process.execPath, args, { cwd: api, env: { ...this.env, ...env }, stdio: ['ignore', log, log, 'ipc'] });
    if (typeof log === 'number') closeSync(log);
    this.children.push(child);
    return child;
  }
}

async function connected(url: string): Promise<pg.Client> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  return client;
}

export function freePort(): Promise<number> {
  return new Promise((done, fail) => {
    const server = createServer().once('error', fail);
    server.listen(0, '127.0.0.1', () => {
      const address = server.address();
      server.close(() => done(typeof address === 'object' && address ? address.port : 0));
    });
  });
}

/** Waits until something holds. */
export async function until(holds: () => Promise<boolean> | boolean, what: string, milliseconds = 20_000): Promise<void> {
  for (const end = Date.now() + milliseconds; !(await holds()); await new Promise((done) => setTimeout(done, 30))) {
    if (Date.now() > end) throw new Error(`Waited too long for ${what}.`);
  }
}
