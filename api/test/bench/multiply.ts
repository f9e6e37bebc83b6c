import { createHash } from 'node:crypto';
import pg from 'pg';
import { connect } from '../../../mocks/postgres.mjs';
import type { House } from '../support/house.ts';

const UUID = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g;

/**
 * Copies a firm with everything of it so many times, for measurements on much data: people stay, every other id becomes another one; a
 * number of copies share a firm, or all of them the first one (`perFirm` infinite). Triggers and foreign keys rest meanwhile, since the copied rows held once.
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
    const sameFirm = perFirm === Number.POSITIVE_INFINITY;
    for (const name of sameFirm ? tables : ['firm', ...tables]) {
      const columns = await plainColumns(client, name);
      const { rows } = await client.query<{ row: string }>(`select to_jsonb(t)::text as row from ${name} t where ${name === 'firm' ? 'id' : 'firm_id'} = $1`, [firmId]);
      // what belongs to the firm and to no job stands once in each copy of the firm
      const ofJobs = name !== 'firm' && (await hasJob(client, name));
      for (let copy = 1; copy <= copies; copy += 1) {
        if (!ofJobs && (sameFirm || (copy - 1) % perFirm !== 0)) continue;
        const another = (id: string): string => (people.has(id) || (sameFirm && id === firmId) ? id : hashed(`${id} ${shared.has(id) ? Math.floor((copy - 1) / perFirm) : copy}`));
        const copied = rows.map(({ row }) => row.replace(UUID, another));
        await client.query(`insert into ${name} (${columns}) select ${columns} from jsonb_populate_recordset(null::${name}, $1::jsonb)`, [`[${copied.join(',')}]`]);
      }
    }
    await client.query(`insert into person (id, system_of, created_at) select gen_random_uuid(), id, created_at from firm f where not exists (select 1 from person p where p.system_of = f.id)`);
    await client.query('analyze');
  } finally {
    await client.end();
  }
}

async function hasJob(client: pg.Client, table: string): Promise<boolean> {
  return (await client.query(`select 1 from pg_attribute where attrelid = $1::regclass and attname = any('{job_id}')`, [table])).rowCount === 1 || table === 'job';
}

/** What can be written: everything that isn't computed by the table itself. */
async function plainColumns(client: pg.Client, table: string): Promise<string> {
  const { rows } = await client.query<{ columns: string }>(`select string_agg(quote_ident(attname), ', ') as columns from pg_attribute where attrelid = $1::regclass and attnum > 0 and not attisdropped and attgenerated = ''`, [table]);
  return rows[0]?.columns ?? '';
}

const hashed = (text: string): string => createHash('md5').update(text).digest('hex').replace(/^(.{8})(.{4})(.{4})(.{4})(.{12})$/, '$1-$2-$3-$4-$5');
