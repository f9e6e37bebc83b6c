import { createHash } from 'node:crypto';
import type { Socket } from 'node:net';
import pg from 'pg';

/** Names by statement, for all connections of the process: the statements are the repositories' own, so there are some hundreds. */
const names = new Map<string, string>();
const MOST_NAMES = 1_000;

/**
 * A client that prepares each statement with values once per connection. Planning a page's statement under row-level security takes
 * longer than running it, and Sequelize has no name to give to it. What falls silent is given up.
 */
export class PreparingClient extends pg.Client {
  override query(...args: unknown[]): never {
    const last = args.at(-1);
    if (typeof last === 'function') args[args.length - 1] = this.givingUpOnSilence(last as Callback);
    const [text, values, ...rest] = args;
    const prepared = typeof text === 'string' && Array.isArray(values) && values.length > 0 ? nameOf(text) : undefined;
    return super.query(...((prepared ? [{ name: prepared, text, values: values as unknown[] }, ...rest] : args) as [string])) as never;
  }

  /** A connection that doesn't answer is of no more use: whatever is asked over it next would wait as long again. */
  private givingUpOnSilence(callback: Callback): Callback {
    return (error, ...more) => {
      if (error?.message === 'Query read timeout') (this as unknown as { connection: { stream: Socket } }).connection.stream.destroy();
      callback(error, ...more);
    };
  }
}

type Callback = (error: Error | null | undefined, ...more: unknown[]) => void;

function nameOf(text: string): string | undefined {
  const known = names.get(text);
  if (known !== undefined || names.size >= MOST_NAMES) return known;
  const name = createHash('sha256').update(text).digest('hex').slice(0, 32);
  names.set(text, name);
  return name;
}
