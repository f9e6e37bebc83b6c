import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { createHash } from 'node:crypto';
import { v7 } from 'uuid';
import type pg from 'pg';
import { createJob, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';

const APPEND_ONLY = ['record_entry', 'ledger_entry', 'ledger_line'];

describe('the record and the ledger in the database', () => {
  let house: House;
  let firmId: string;
  let jobId: string;
  let personId: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    const { url } = await house.web();
    const made = await principalWithFirm(house, url);
    firmId = made.firmId;
    jobId = (await createJob(made.principal, firmId)).id;
    personId = (await house.sql<{ id: string }>('select id from person where email = $1', [made.principal.email]))[0]?.id ?? '';
  });
  afterAll(() => house.close());

  /** Acts as the principal on the writing role and commits. */
  const write = (work: (client: pg.Client) => Promise<unknown>) =>
    house.as('app_write', async (client) => {
      await client.query('begin');
      await client.query(`select set_config('app.actor', $1, true)`, [personId]);
      await work(client);
      await client.query('commit');
      return [];
    });
  const entry = (client: pg.Client, id: string, cause = 'adjustment') =>
    client.query('insert into ledger_entry (firm_id, job_id, id, cause, cause_id, memo, at, on_date) values ($1, $2, $3, $4, $5, $6, now(), current_date)', [firmId, jobId, id, cause, id, 'test']);
  const line = (client: pg.Client, id: string, position: number, account: string, cents: number) =>
    client.query('insert into ledger_line (firm_id, job_id, entry_id, position, account, amount_cents) values ($1, $2, $3, $4, $5, $6)', [firmId, jobId, id, position, account, cents]);

  it('chains every entry to the one before by the hash of its exact text', async () => {
    const entries = await house.sql<{ text: string; hash: string }>(`select text, hash from record_entry where job_id = $1 and chain = 'shared' order by seq`, [jobId]);
    let previous = '0'.repeat(64);
    for (const { text, hash } of entries) {
      expect(hash).toBe(createHash('sha256').update(`${previous}\n${text}`).digest('hex'));
      previous = hash;
    }
    expect(entries).toHaveLength(1);
    expect(await house.sql('select seq::int, hash from record_head where job_id = $1 and chain = $2', [jobId, 'shared'])).toEqual([{ seq: 1, hash: previous }]);
  });

  it('refuses a wrong hash, a gap and a head that is set by hand', async () => {
    const insert = (seq: number, hash: string) => write((client) => client.query(`insert into record_entry (firm_id, job_id, chain, seq, text, hash) values ($1, $2, 'shared', $3, '{}', $4)`, [firmId, jobId, seq, hash]));
    await expect(insert(2, 'f'.repeat(64))).rejects.toMatchObject({ code: 'TP011' });
    await expect(insert(7, 'f'.repeat(64))).rejects.toMatchObject({ code: 'TP010' });
    await expect(write((client) => client.query(`update record_head set hash = repeat('0', 64) where job_id = $1`, [jobId]))).rejects.toMatchObject({ code: 'TP020' });
  });

  it.each(APPEND_ONLY)('refuses to change, delete or empty %s, for its owner too', async (table) => {
    await expect(write(async (client) => {
      const id = v7();
      await entry(client, id);
      await line(client, id, 0, 'bank', 100);
      await line(client, id, 1, 'billed_work', -100);
    })).resolves.toEqual([]);
    await expect(house.sql(`update ${table} set job_id = job_id`)).rejects.toMatchObject({ code: 'TP020' });
    await expect(house.sql(`delete from ${table}`)).rejects.toMatchObject({ code: 'TP020' });
    await expect(house.sql(`truncate ${table} cascade`)).rejects.toMatchObject({ code: 'TP020' });
    await expect(write((client) => client.query(`delete from ${table}`))).rejects.toMatchObject({ code: expect.stringMatching(/42501|TP020/) as unknown });
  });

  it('refuses entries that do not balance, and one without lines', async () => {
    await expect(write(async (client) => {
      const id = v7();
      await entry(client, id);
      await line(client, id, 0, 'bank', 100);
      await line(client, id, 1, 'billed_work', -99);
    })).rejects.toMatchObject({ code: 'TP021' });
    await expect(write((client) => entry(client, v7()))).rejects.toMatchObject({ code: 'TP021' });
  });

  it('takes one entry per cause', async () => {
    const id = v7();
    const book = () => write(async (client) => {
      await client.query(`insert into ledger_entry (firm_id, job_id, id, cause, cause_id, memo, at, on_date) values ($1, $2, $3, 'payment', 'the same', 'test', now(), current_date)`, [firmId, jobId, v7()]);
      throw new Error('unreached lines');
    });
    await write(async (client) => {
      await client.query(`insert into ledger_entry (firm_id, job_id, id, cause, cause_id, memo, at, on_date) values ($1, $2, $3, 'payment', 'the same', 'test', now(), current_date)`, [firmId, jobId, id]);
      await line(client, id, 0, 'bank', 100);
      await line(client, id, 1, 'homeowner_receivable', -100);
    });
    await expect(book()).rejects.toMatchObject({ code: '23505' });
  });
});
