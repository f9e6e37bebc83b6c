import { createHash } from 'node:crypto';
import pg from 'pg';
import { connect } from '../../../mocks/postgres.mjs';
import type { House } from '../support/house.ts';

const UUID = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g;

/**
 * Copies a firm with everything of it so many times, for measurements on much data: people stay, every other id becomes another one; a
 * number of copies share a firm. Triggers and foreign keys rest meanwhile, since the copied rows held once.
 */
export async function multiply(house: House, firmId: string, copies: number, perFirm: number): Promise<void> {
  const server = connect(JSON.parse(process.env['TEST_PG'] ?? '{}') as Parameters<typeof connect>[0]);
  const client = new pg.Client({ connectionString: server.superUrl(house.database) });
  await client.connect();
  try {
    await client.query(`set session_replication_role = replica; set row_security = off`);
    const people = new Set((await client.query<{ id: string }>('select id from person')).rows.map(({ id }) => id));
    const shared = new Set([firmId]);
    const tables = (await client.query<{ name: string }>(`select c.relname as name from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attname = 'firm_id' where c.relkind = 'r' and c.relnamespace = 'public'::regnamespace`)).rows.map(({ name }) => name);
    for (const name of ['firm', ...tables]) {
      const { rows } = await client.query<{ row: string }>(`select to_jsonb(t)::text as row from ${name} t where ${name === 'firm' ? 'id' : 'firm_id'} = $1`, [firmId]);
      for (let copy = 1; copy <= copies; copy += 1) {
        const another = (id: string): string => (people.has(id) ? id : hashed(`${id} ${shared.has(id) ? Math.floor((copy - 1) / perFirm) : copy}`));
        const copied = rows.map(({ row }) => row.replace(UUID, another));
        await client.query(`insert into ${name} select * from jsonb_populate_recordset(null::${name}, $1::jsonb) on conflict do nothing`, [`[${copied.join(',')}]`]);
      }
    }
    await client.query('analyze');
  } finally {
    await client.end();
  }
}

const hashed = (text: string): string => createHash('md5').update(text).digest('hex').replace(/^(.{8})(.{4})(.{4})(.{4})(.{12})$/, '$1-$2-$3-$4-$5');
