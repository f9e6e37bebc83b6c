import type pg from 'pg';

export interface StoredRow {
  key: string;
  /** Unknown for the sizes that are made of a photo. */
  sha256: string | null;
  bytes: number;
}

/** Everything that the database says is stored. */
export async function storedRows(client: pg.Client): Promise<StoredRow[]> {
  const { rows } = await client.query<{ key: string; sha256: string | null; bytes: string }>(
    `select storage_key as key, sha256, bytes::text from file
     union all select storage_key, sha256, bytes::text from document
     union all select s->>'key', null, s->>'bytes' from photo, jsonb_array_elements(sizes) s
     order by key`,
  );
  return rows.map(({ key, sha256, bytes }) => ({ key, sha256, bytes: Number(bytes) }));
}

export async function appliedMigrations(client: pg.Client): Promise<string[]> {
  return (await client.query<{ name: string }>('select name from migration order by name')).rows.map(({ name }) => name);
}

/** Opens a transaction whose view of the data others can share; it lasts until the client's end. */
export async function exportSnapshot(client: pg.Client): Promise<string> {
  await client.query('begin isolation level repeatable read, read only');
  return (await client.query<{ id: string }>('select pg_export_snapshot() as id')).rows[0]?.id ?? '';
}

/** Firms in a database; undefined where there is no table for them. */
export async function firmsIn(client: pg.Client): Promise<number | undefined> {
  const { rows } = await client.query<{ there: boolean }>(`select to_regclass('public.firm') is not null as there`);
  if (!rows[0]?.there) return undefined;
  return (await client.query<{ n: number }>('select count(*)::int as n from firm')).rows[0]?.n;
}

/** Connections of servers to this database. */
export async function serversIn(client: pg.Client): Promise<number> {
  const { rows } = await client.query<{ n: number }>(
    `select count(*)::int as n from pg_stat_activity where datname = current_database() and usename in ('app_read', 'app_write', 'app_worker', 'queue_owner')`,
  );
  return rows[0]?.n ?? 0;
}

/** Removes everything of the application; of the queue with the other owner's client. */
export const emptyApp = (client: pg.Client) => client.query('drop schema if exists app cascade; drop schema public cascade; create schema public authorization pg_database_owner; grant usage on schema public to public');
export const emptyQueue = (client: pg.Client) => client.query('drop schema if exists graphile_worker cascade');
export const analyze = (client: pg.Client) => client.query('analyze');
