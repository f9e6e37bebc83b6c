import { createHash } from 'node:crypto';
import { readdirSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import path from 'node:path';
import type pg from 'pg';
import { Umzug } from 'umzug';

/** A migration that was applied has been edited since. */
export class EditedMigration extends Error {
  override readonly name = 'EditedMigration';
}

export interface AppliedMigration {
  name: string;
  sha256: string;
}

const NAME = /^\d{4}-.+\.(ts|js)$/;
const folder = fileURLToPath(new URL('./migrations', import.meta.url));
const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');

/**
 * Applies SQL migrations as the owner, each in one transaction with the note that it was applied. The note keeps the SQL's SHA-256:
 * an edited migration is an error, never silently skipped. Two migrators at once wait for each other.
 */
export async function migrate(client: pg.Client): Promise<string[]> {
  await client.query(`create table if not exists migration (name text primary key, sha256 text not null, applied_at timestamptz not null default now())`);
  await client.query(`select pg_advisory_lock(hashtext('migration'))`);
  try {
    const files = filesOf();
    const umzug = new Umzug({
      migrations: await Promise.all(files.map((file) => migration(client, file))),
      context: client,
      storage: { logMigration: () => Promise.resolve(), unlogMigration: () => Promise.resolve(), executed: () => applied(client) },
      logger: undefined,
    });
    await refuseEdited(client, files);
    return (await umzug.up()).map(({ name }) => name);
  } finally {
    await client.query(`select pg_advisory_unlock(hashtext('migration'))`);
  }
}

/** Migrations of this build that a database lacks, or has in other words. Newer ones in the database are another build's. */
export async function missingMigrations(applied: readonly AppliedMigration[]): Promise<string[]> {
  const hashes = new Map(applied.map((row) => [row.name, row.sha256]));
  const missing: string[] = [];
  for (const file of filesOf()) if (hashes.get(nameOf(file)) !== sha256(await sqlOf(file))) missing.push(nameOf(file));
  return missing;
}

/** Migrations that this build doesn't know. */
export function unknownMigrations(applied: readonly string[]): string[] {
  const known = new Set(filesOf().map(nameOf));
  return applied.filter((name) => !known.has(name));
}

const filesOf = () => readdirSync(folder).filter((file) => NAME.test(file)).sort();

async function sqlOf(file: string): Promise<string> {
  const module = (await import(pathToFileURL(path.join(folder, file)).href)) as { default: string };
  return module.default;
}

const nameOf = (file: string) => file.replace(/\.(ts|js)$/, '');

async function migration(client: pg.Client, file: string) {
  const sql = await sqlOf(file);
  return {
    name: nameOf(file),
    up: async () => {
      await client.query('begin');
      try {
        await client.query(sql);
        await client.query('insert into migration (name, sha256) values ($1, $2)', [nameOf(file), sha256(sql)]);
        await client.query('commit');
      } catch (error) {
        await client.query('rollback');
        throw error;
      }
    },
  };
}

async function applied(client: pg.Client): Promise<string[]> {
  return (await client.query<{ name: string }>('select name from migration order by name')).rows.map(({ name }) => name);
}

async function refuseEdited(client: pg.Client, files: string[]): Promise<void> {
  const { rows } = await client.query<{ name: string; sha256: string }>('select name, sha256 from migration');
  const hashes = new Map(rows.map((row) => [row.name, row.sha256]));
  for (const file of files) {
    const known = hashes.get(nameOf(file));
    if (known !== undefined && known !== sha256(await sqlOf(file))) {
      throw new EditedMigration(`Migration ${nameOf(file)} was edited after it had been applied. Undo the edit, or run "npm run reset" to start with an empty database.`);
    }
  }
}
