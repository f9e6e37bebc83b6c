import { createHash } from 'node:crypto';
import type { Socket } from 'node:net';
import pg from 'pg';

/** Names by statement, for all connections of the process: the statements are the repositories' own, so there are some hundreds. */
const names = new Map<string, string>();
const MOST_NAMES = 1_000;

const NOTHING = { rows: [], rowCount: 0, command: '' };

/**
 * A client that prepares each statement with values once per connection, and waits for no answer that says nothing. Planning a page's
 * statement under row-level security takes longer than running it, and Sequelize has no name to give to it. The beginning of a transaction
 * is sent together with its first statement: the server takes them in order, and where the beginning failed the first statement finds that
 * nobody acts. What falls silent is given up.
 */
export class PreparingClient extends pg.Client {
  private held = false;

  constructor(config: pg.ClientConfig) {
    super({ ...config, pipeline: true });
  }

  override query(...args: unknown[]): never {
    const last = args.at(-1);
    if (typeof last === 'function') args[args.length - 1] = this.givingUpOnSilence(last as Callback);
    const [text, values, ...rest] = args;
    if (typeof text === 'string' && typeof values === 'function' && this.saysNothing(text)) {
      this.hold(text === BEGIN);
      super.query(text, () => undefined);
      queueMicrotask(() => (values as Callback)(null, NOTHING));
      return undefined as never;
    }
    const prepared = typeof text === 'string' && Array.isArray(values) && values.length > 0 ? nameOf(text) : undefined;
    const answer = super.query(...((prepared ? [{ name: prepared, text, values: values as unknown[] }, ...rest] : args) as [string])) as never;
    this.hold(false);
    return answer;
  }

  /** Keeps what is written for one packet with what comes next. */
  private hold(hold: boolean): void {
    if (hold !== this.held) this.stream[hold ? 'cork' : 'uncork']();
    this.held = hold;
  }

  private get stream(): Socket {
    return (this as unknown as { connection: { stream: Socket } }).connection.stream;
  }

  /** A connection that doesn't answer is of no more use: whatever is asked over it next would wait as long again. */
  private givingUpOnSilence(callback: Callback): Callback {
    return (error, ...more) => {
      if (error?.message === 'Query read timeout') this.stream.destroy();
      callback(error, ...more);
    };
  }

  /** Whether the answer to a statement may be passed over. */
  protected saysNothing(text: string): boolean {
    return text === BEGIN;
  }
}

/** Of a transaction that only reads, the end says nothing either. */
export class ReadingClient extends PreparingClient {
  protected override saysNothing(text: string): boolean {
    return text === COMMIT || super.saysNothing(text);
  }
}

const BEGIN = 'START TRANSACTION;';
const COMMIT = 'COMMIT;';

type Callback = (error: Error | null | undefined, ...more: unknown[]) => void;

function nameOf(text: string): string | undefined {
  const known = names.get(text);
  if (known !== undefined || names.size >= MOST_NAMES) return known;
  const name = createHash('sha256').update(text).digest('hex').slice(0, 32);
  names.set(text, name);
  return name;
}
