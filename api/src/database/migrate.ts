// Migrates the application's schema and the queue's, then ends.
import pg from 'pg';
import { runMigrations } from 'graphile-worker';
import { z } from 'zod';
import { enqueueSql } from '../queue/enqueue-sql.ts';
import { EditedMigration, migrate } from './migrator.ts';

const environment = z.object({ DATABASE_OWNER_URL: z.url(), QUEUE_URL: z.url() }).parse(process.env);

async function withClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

try {
  await runMigrations({ connectionString: environment.QUEUE_URL });
  await withClient(environment.QUEUE_URL, (client) => client.query(enqueueSql));
  const names = await withClient(environment.DATABASE_OWNER_URL, migrate);
  console.log(names.length === 0 ? 'The database is up to date.' : `Migrated: ${names.join(', ')}.`);
} catch (error) {
  console.error(error instanceof EditedMigration ? error.message : `The migration failed: ${error instanceof Error ? error.message : String(error)}`);
  process.exitCode = 1;
}
