import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import type pg from 'pg';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';

interface TableRow {
  table_name: string;
  secured: boolean;
  forced: boolean;
  policies: number;
}

const TABLES = `select c.relname as table_name, c.relrowsecurity as secured, c.relforcerowsecurity as forced,
    (select count(*)::int from pg_policy p where p.polrelid = c.oid) as policies
  from pg_class c join pg_namespace n on n.oid = c.relnamespace
  where n.nspname = 'public' and c.relkind in ('r', 'p') and c.relname <> 'migration' order by 1`;
/** Reached through definer functions only, or holding nothing of anybody. */
const WITHOUT_POLICY = ['account_notice', 'address_change', 'guest_code', 'guest_session', 'rate_limit', 'sign_in_code', 'sign_in_step', 'stripe_event'];

describe('what the database itself refuses', () => {
  let house: House;
  let strangerId: string;
  let homeownerId: string;
  let jobId: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    const { url } = await house.web();
    const { principal, firmId } = await principalWithFirm(house, url);
    jobId = (await createJob(principal, firmId)).id;
    const homeowner = await join(principal, jobId, 'homeowner');
    const { principal: stranger } = await principalWithFirm(house, url);
    const idOf = async (email: string) => (await house.sql<{ id: string }>('select id from person where email = $1', [email]))[0]?.id ?? '';
    [strangerId, homeownerId] = [await idOf(stranger.email), await idOf(homeowner.email)];
  });
  afterAll(() => house.close());

  const actingAs = (person: string, sql: string, values: unknown[] = []) =>
    house.as('app_write', async (client: pg.Client) => {
      await client.query('begin');
      await client.query(`select set_config('app.actor', $1, true)`, [person]);
      const { rows } = await client.query(sql, values);
      await client.query('rollback');
      return rows as pg.QueryResultRow[];
    });

  it('secures every table, for its owner too', async () => {
    const tables = await house.sql<TableRow>(TABLES);
    expect(tables.length).toBeGreaterThan(12);
    const open = tables.filter(({ table_name: name, secured, forced, policies }) => !WITHOUT_POLICY.includes(name) && !(secured && forced && policies > 0));
    expect(open.map(({ table_name: name }) => name)).toEqual([]);
  });

  it('keeps what one actor may reach from the next one in the same transaction', async () => {
    const counted = await house.as('app_read', async (client: pg.Client) => {
      const seen: pg.QueryResultRow[] = [];
      await client.query('begin');
      for (const person of [homeownerId, strangerId, homeownerId]) {
        await client.query(`select set_config('app.actor', $1, true)`, [person]);
        seen.push(...((await client.query('select count(*)::int as jobs, (select count(*)::int from person where id = $2) as known from job where id = $1', [jobId, homeownerId])).rows as pg.QueryResultRow[]));
      }
      await client.query('rollback');
      return seen;
    });
    expect(counted).toEqual([{ jobs: 1, known: 1 }, { jobs: 0, known: 0 }, { jobs: 1, known: 1 }]);
  });

  it('gives every table that names a job a policy by firm or job', async () => {
    const rows = await house.sql<{ table_name: string; expression: string }>(
      `select c.relname as table_name, string_agg(coalesce(pg_get_expr(p.polqual, p.polrelid), '') || coalesce(pg_get_expr(p.polwithcheck, p.polrelid), ''), ' ') as expression
       from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attname = 'job_id' and not a.attisdropped
       left join pg_policy p on p.polrelid = c.oid where c.relkind = 'r' and c.relnamespace = 'public'::regnamespace group by 1`,
    );
    for (const { table_name: name, expression } of rows) expect(`${name}: ${expression}`).toMatch(/my_firms|my_jobs|actor/);
  });

  it('lets no runtime role own, bypass or create anything', async () => {
    const roles = await house.sql(`select rolname, rolsuper, rolbypassrls, rolcreaterole, rolcreatedb from pg_roles where rolname like 'app\\_%' order by 1`);
    expect(roles).toEqual(['app_read', 'app_worker', 'app_write'].map((rolname) => ({ rolname, rolsuper: false, rolbypassrls: false, rolcreaterole: false, rolcreatedb: false })));
    const owned = await house.sql(`select relname from pg_class c join pg_roles r on r.oid = c.relowner where r.rolname like 'app\\_%'`);
    expect(owned).toEqual([]);
  });

  it('fails loudly where nobody acts', async () => {
    await expect(house.as('app_write', async (client) => (await client.query('select * from job')).rows)).rejects.toMatchObject({ code: 'TP001' });
  });

  it('shows a stranger nothing of any table of a job', async () => {
    const tables = await house.sql<{ table_name: string }>(
      `select c.table_name from information_schema.columns c join information_schema.role_table_grants g
         on g.table_name = c.table_name and g.grantee = 'app_write' and g.privilege_type = 'SELECT'
       where c.table_schema = 'public' and c.column_name = 'job_id' order by 1`,
    );
    expect(tables.length).toBeGreaterThan(4);
    for (const { table_name: name } of tables) {
      expect([name, await actingAs(strangerId, `select 1 from "${name}" where job_id = $1`, [jobId])]).toEqual([name, []]);
    }
    expect(await actingAs(strangerId, 'select id from job')).toEqual([]);
    expect(await actingAs(homeownerId, 'select id from job')).toEqual([{ id: jobId }]);
  });

  it('keeps what is the firm\'s alone from the homeowner', async () => {
    expect(await actingAs(homeownerId, 'select * from firm_pricing')).toEqual([]);
    expect(await actingAs(homeownerId, 'select * from invitation')).toEqual([]);
    expect(await actingAs(homeownerId, `select chain from record_head order by 1`)).toEqual([{ chain: 'shared' }]);
  });

  it('does not let a stranger write into the job or take a firm', async () => {
    const append = `select * from app.append_record((select firm_id from job where id = $1), $1, 'shared', '{"a":1}')`;
    await expect(actingAs(strangerId, append, [jobId])).rejects.toMatchObject({ code: expect.stringMatching(/TP012|42501/) as unknown });
    await expect(actingAs(strangerId, `update job set name = 'Mine' where id = $1 returning id`, [jobId])).resolves.toEqual([]);
    await expect(actingAs(strangerId, `insert into firm_member select firm_id, $1, 'principal', now() from job`, [strangerId])).rejects.toMatchObject({ code: '42501' });
  });

  it('does not let the reading role write', async () => {
    await expect(house.as('app_read', async (client) => (await client.query(`update person set name = 'x'`)).rows)).rejects.toMatchObject({ code: expect.stringMatching(/25006|42501/) as unknown });
  });
});
