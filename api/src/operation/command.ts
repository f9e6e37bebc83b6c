import pg from 'pg';
import { parseArgs, type ParseArgsConfig } from 'node:util';
import { z } from 'zod';

const Owners = z.object({ DATABASE_OWNER_URL: z.url(), QUEUE_URL: z.url() });

/** Addresses of the two owners: of the application's schemas and of the queue's. */
export interface Owners {
  app: string;
  queue: string;
}

export function ownersOf(environment: NodeJS.ProcessEnv): Owners {
  const { data, error } = Owners.safeParse(environment);
  if (!data) throw new Refusal(error.issues.map(({ path }) => `${path.join('.')} must be set to a database address.`).join('\n'));
  return { app: data.DATABASE_OWNER_URL, queue: data.QUEUE_URL };
}

/** Something the person at the keyboard can do something about: shown as it is. */
export class Refusal extends Error {
  override readonly name = 'Refusal';
}

/** What stands behind a command's name; anything unknown is refused. */
export function options<const T extends NonNullable<ParseArgsConfig['options']>>(wanted: T) {
  try {
    return parseArgs<{ options: T; strict: true }>({ options: wanted, strict: true }).values;
  } catch (error) {
    throw new Refusal(error instanceof Error ? error.message : String(error));
  }
}

/** Runs a command to its end; it says whether all is well. */
export async function command(work: () => Promise<boolean>): Promise<void> {
  try {
    process.exitCode = (await work()) ? 0 : 1;
  } catch (error) {
    console.error(error instanceof Refusal ? error.message : error);
    process.exitCode = 1;
  }
}

export async function withClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}
