import { createHash } from 'node:crypto';
import pg from 'pg';

/** Names by statement, for all connections of the process: the statements are the repositories' own, so there are some hundreds. */
const names = new Map<string, string>();
const MOST_NAMES = 1_000;

/**
 * A client that prepares each statement with values once per connection. Planning a page's statement under row-level security takes
 * longer than running it, and Sequelize has no name to give to it.
 */
export class PreparingClient extends pg.Client {
  override query(...args: unknown[]): never {
    const [text, values, ...rest] = args;
    const prepared = typeof text === 'string' && Array.isArray(values) && values.length > 0 ? nameOf(text) : undefined;
    return super.query(...((prepared ? [{ name: prepared, text, values: values as unknown[] }, ...rest] : args) as [string])) as never;
  }
}

function nameOf(text: string): string | undefined {
  const known = names.get(text);
  if (known !== undefined || names.size >= MOST_NAMES) return known;
  const name = createHash('sha256').update(text).digest('hex').slice(0, 32);
  names.set(text, name);
  return name;
}
