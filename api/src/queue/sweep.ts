import { EventEmitter } from 'node:events';
import pg from 'pg';

const EVERY_MS = 2_000;
/** After our connection was gone others may still be coming back, their locks not yet taken again. */
const QUIET_MS = 10_000;
const PATIENCE = { connectionTimeoutMillis: 5_000, query_timeout: 12_000, keepAlive: true };

/**
 * A killed worker's jobs would stay locked for hours. Each worker holds an advisory lock named by its pool's id on a connection that
 * dies with it; whoever can take the lock of a pool knows that it is gone and frees its jobs. A connection that breaks (the database
 * was restarted) is made anew and the lock taken again.
 */
export class DeadWorkerSweep {
  readonly events = new EventEmitter();
  private client: pg.Client | undefined;
  private readonly pool: Promise<string>;
  private quietUntil = 0;
  private closed = false;
  private round: Promise<void> = Promise.resolve();
  private timer: NodeJS.Timeout | undefined;

  constructor(private readonly url: string) {
    this.pool = new Promise((known) => this.events.once('pool:create', ({ workerPool }: { workerPool: { id: string } }) => known(workerPool.id)));
  }

  /** Resolves when this worker's own lock is held; then sweeps until closed. */
  async start(onError: (error: unknown) => void): Promise<void> {
    await this.hold(onError);
    const look = () => {
      this.round = this.look(onError).catch(onError);
      void this.round.finally(() => {
        if (!this.closed) this.timer = setTimeout(look, EVERY_MS);
      });
    };
    this.timer = setTimeout(look, EVERY_MS);
  }

  async close(): Promise<void> {
    this.closed = true;
    clearTimeout(this.timer);
    await this.round;
    await this.client?.end();
  }

  private async look(onError: (error: unknown) => void): Promise<void> {
    if (!this.client) {
      this.quietUntil = Date.now() + QUIET_MS;
      await this.hold(onError);
    }
    if (Date.now() >= this.quietUntil) await this.sweep();
  }

  private async hold(onError: (error: unknown) => void): Promise<void> {
    const client = new pg.Client({ connectionString: this.url, ...PATIENCE });
    const lose = (error?: Error) => {
      if (this.client === client) this.client = undefined;
      if (error && !this.closed) onError(error);
    };
    client.on('error', lose).on('end', lose);
    await client.connect();
    await client.query('select pg_advisory_lock(hashtext($1))', [await this.pool]);
    this.client = client;
  }

  private async sweep(): Promise<void> {
    // a connection can take its own lock again, which would free the jobs that run here at this moment
    await this.client?.query(
      `select graphile_worker.force_unlock_workers(array_agg(w)) from (
        select distinct locked_by as w from graphile_worker.jobs where locked_at < now() - interval '2 seconds' and locked_by <> $1) x
        where pg_try_advisory_xact_lock(hashtext(w)) having count(*) > 0`,
      [await this.pool],
    );
  }
}
