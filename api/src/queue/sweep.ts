import { EventEmitter } from 'node:events';
import pg from 'pg';

const EVERY_MS = 2_000;

/**
 * A killed worker's jobs would stay locked for hours. Each worker holds an advisory lock named by its pool's id on a connection that
 * dies with it; whoever can take the lock of a pool knows that it is gone and frees its jobs.
 */
export class DeadWorkerSweep {
  readonly events = new EventEmitter();
  private readonly held: Promise<unknown>;
  private own = '';
  private timer: NodeJS.Timeout | undefined;

  private constructor(private readonly client: pg.Client) {
    this.held = new Promise((done, fail) => {
      this.events.once('pool:create', ({ workerPool }: { workerPool: { id: string } }) => {
        this.own = workerPool.id;
        client.query('select pg_advisory_lock(hashtext($1))', [workerPool.id]).then(done, fail);
      });
    });
  }

  static async connect(url: string): Promise<DeadWorkerSweep> {
    const client = new pg.Client({ connectionString: url });
    await client.connect();
    return new DeadWorkerSweep(client);
  }

  /** Resolves when this worker's own lock is held; then sweeps until closed. */
  async start(onError: (error: unknown) => void): Promise<void> {
    this.client.on('error', onError);
    await this.held;
    this.timer = setInterval(() => void this.sweep().catch(onError), EVERY_MS);
  }

  async close(): Promise<void> {
    clearInterval(this.timer);
    await this.client.end();
  }

  private async sweep(): Promise<void> {
    // a connection can take its own lock again, which would free the jobs that run here at this moment
    await this.client.query(
      `select graphile_worker.force_unlock_workers(array_agg(w)) from (
        select distinct locked_by as w from graphile_worker.jobs where locked_at < now() - interval '2 seconds' and locked_by <> $1) x
        where pg_try_advisory_xact_lock(hashtext(w)) having count(*) > 0`,
      [this.own],
    );
  }
}
