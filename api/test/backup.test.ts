import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { appendFileSync, cpSync, existsSync, mkdtempSync, readFileSync, readdirSync, rmSync, statSync, truncateSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 } from 'uuid';
import type { Draw } from '@tallypole/shared/schemas/draws';
import { createJob } from './support/builders.ts';
import { issueChange, signChange, startChange } from './support/change-builders.ts';
import { operate } from './support/commands.ts';
import { approvedDraw, drawAt, lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House, until } from './support/house.ts';
import { StorageStandIn } from './support/storage-stand-in.ts';

/** Every table's rows as one sum each, whatever their order. */
const contents = (house: House) =>
  house.sql<{ name: string; sum: string }>(
    `select name, (xpath('/row/s/text()', query_to_xml(format('select coalesce(md5(string_agg(md5(t::text), '''' order by md5(t::text))), ''-'') as s from %I t', name), false, true, '')))[1]::text as sum
     from (select tablename::text as name from pg_tables where schemaname = 'public' and tablename <> 'rate_limit') x order by name`,
  );

describe('a backup', () => {
  let house: House;
  let empty: House;
  let work: string;
  let lent: LentJob;
  let draw: Draw;
  const folder = (name: string) => path.join(work, name);

  beforeAll(async () => {
    work = mkdtempSync(path.join(tmpdir(), 'tally-backup-'));
    [house, empty] = [await House.open(), await House.open()];
    const worker = await house.worker();
    const { url, child } = await house.web();
    lent = await lentJob(house, url);
    draw = await approvedDraw(lent);
    const seen = await issueChange(lent, await startChange(lent));
    await signChange(lent, lent.ann, seen);
    await signChange(lent, lent.ben, seen);
    await until(async () => (await house.sql<{ n: number }>(`select (select count(*) from notice where sent_at is null)::int + (select count(*) from photo where state = 'stored')::int + (select count(*) from change where signed_document_id is null)::int as n`))[0]?.n === 0, 'the worker to be done');
    await house.kill(worker);
    // one act whose mail still waits in the queue
    made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id: v7(), email: 'waits@people.example', name: 'Pat Rowe', role: 'homeowner' }));
    await house.kill(child);
    const done = await operate(house, 'backup', ['--to', folder('good')]);
    expect([done.status, done.errors]).toEqual([0, '']);
  });
  afterAll(async () => {
    await Promise.all([house.close(), empty.close()]);
    rmSync(work, { recursive: true });
  });

  it('can be looked into by its maker alone', () => {
    const open = readdirSync(folder('good'), { recursive: true, encoding: 'utf8' }).filter((name) => (statSync(path.join(folder('good'), name)).mode & 0o077) !== 0);
    expect([statSync(folder('good')).mode & 0o077, open]).toEqual([0, []]);
  });

  it('knows every column that points at a stored file', async () => {
    const columns = await house.sql<{ at: string }>(`select table_name || '.' || column_name as at from information_schema.columns where table_schema = 'public' and column_name ~ '(storage|file|object)_key$' order by 1`);
    expect(columns.map(({ at }) => at)).toEqual(['document.storage_key', 'file.storage_key']);
  });

  it('is checked as whole, and fills a fresh database and an empty store with the same', async () => {
    const check = await operate(house, 'check');
    expect([check.status, check.output.includes('BROKEN')]).toEqual([0, false]);
    expect(check.output).toMatch(/ok +every stored file is there with its SHA-256 \((?!0)\d+\)/);
    const fresh = await House.open();
    try {
      const done = await operate(fresh, 'restore', ['--from', folder('good')]);
      expect([done.errors, done.status]).toEqual(['', 0]);
      expect(done.output).toContain('Restored as of');
      expect(done.output).toMatch(/ok +every unsent mail has its job \(1\)/);
      expect(await contents(fresh)).toEqual(await contents(house));
      // it lives: who was signed in still is, the mail that waited goes out, and the rules of the tables hold
      await fresh.worker();
      const { url } = await fresh.web();
      await fresh.mail.wait('waits@people.example', /invites you/);
      const again = made<Draw>(await lent.ann.at(url).get(drawAt(lent, draw.id)));
      expect([again.state, again.number]).toEqual([draw.state, draw.number]);
      await createJob(lent.principal.at(url), lent.firmId);
      await expect(fresh.as('app_write', async (client) => (await client.query(`update record_entry set text = 'x'`)).rows as object[])).rejects.toThrow();
      await expect(fresh.as('app_read', async (client) => (await client.query('select * from job')).rows as object[])).rejects.toThrow();
    } finally {
      await fresh.close();
    }
  });

  it('fills a bucket as well as a folder', async () => {
    const standIn = await StorageStandIn.open();
    const fresh = await House.open(standIn.env);
    try {
      const done = await operate(fresh, 'restore', ['--from', folder('good')]);
      expect([done.errors, done.status]).toEqual(['', 0]);
      expect((await standIn.kept()).objects.length).toBe(JSON.parse(readFileSync(path.join(folder('good'), 'manifest.json'), 'utf8')).stored);
    } finally {
      await fresh.close();
      await standIn.close();
    }
  });

  it('is not put over a database that has something in it, unless it is said', async () => {
    const before = await contents(house);
    const refused = await operate(house, 'restore', ['--from', folder('good')]);
    expect([refused.status, refused.errors]).toEqual([1, 'This database is not empty: it has 1 firm. To replace everything in it, add --over.']);
    expect(await contents(house)).toEqual(before);
    await house.sql(`update job set name = 'Changed since'`);
    expect((await operate(house, 'restore', ['--from', folder('good'), '--over'])).status).toBe(0);
    expect(await contents(house)).toEqual(before);
  });

  it('is not put under running servers', async () => {
    const { child } = await house.web();
    const refused = await operate(house, 'restore', ['--from', folder('good'), '--over']);
    expect([refused.status, refused.errors]).toEqual([1, expect.stringMatching(/^\d+ connections of running servers use this database\. Stop them first\.$/)]);
    await house.kill(child);
  });

  it.each([
    ['a stored file', (at: string) => flip(path.join(at, 'files', firstFile(at))), /^files\/.* is not what was backed up/],
    ['the dump', (at: string) => flip(path.join(at, 'app.dump')), /^app\.dump is not what was backed up/],
    ['the dump of the queue', (at: string) => flip(path.join(at, 'queue.dump')), /^queue\.dump is not what was backed up/],
    ['the list', (at: string) => appendFileSync(path.join(at, 'files.jsonl'), ' '), /^files\.jsonl is not what was backed up/],
    ['the end of the dump', (at: string) => truncateSync(path.join(at, 'app.dump'), 1_000), /^app\.dump is not what was backed up/],
    ['a missing file', (at: string) => rmSync(path.join(at, 'files', firstFile(at))), /^files\/.* is missing from the backup\.$/],
    ['a missing manifest', (at: string) => rmSync(path.join(at, 'manifest.json')), /holds no whole backup/],
    ['a manifest of something else', (at: string) => writeFileSync(path.join(at, 'manifest.json'), '{"format":2}'), /can't be read as a manifest/],
    ['a newer version', (at: string) => renamed(path.join(at, 'manifest.json'), '0017-operation', '9999-future'), /^This backup is of a newer version: it has 9999-future\./],
  ])('with one thing broken, %s, is refused before anything is touched', async (_what, damage, message) => {
    const at = folder('broken');
    rmSync(at, { recursive: true, force: true });
    cpSync(folder('good'), at, { recursive: true });
    damage(at);
    const done = await operate(empty, 'restore', ['--from', at]);
    expect([done.status, done.output]).toEqual([1, '']);
    expect(done.errors).toMatch(message);
    expect(existsSync(empty.env['FILES_DIR'] ?? '')).toBe(false);
    expect(await empty.sql('select 1 from firm')).toEqual([]);
  });

  it('refuses a folder with something in it, and words it does not know', async () => {
    expect((await operate(house, 'backup', ['--to', folder('good')])).errors).toMatch(/is not empty\. Name a new folder\.$/);
    expect((await operate(house, 'backup')).errors).toBe('Say where the backup goes: npm run backup -- --to <folder>');
    expect((await operate(house, 'restore', ['--form', 'x'])).errors).toContain("Unknown option '--form'");
    expect((await operate(house, 'check', [], { DATABASE_OWNER_URL: '' })).errors).toBe('DATABASE_OWNER_URL must be set to a database address.');
  });

  // from here on the house is damaged
  const stored = async (what: string) => path.join(house.env['FILES_DIR'] ?? '', (await house.sql<{ key: string }>(what))[0]?.key ?? '');
  /** As somebody could who holds the whole database. */
  const unguarded = (sql: string) => house.asSuper(`set session_replication_role = replica; ${sql}`);

  it.each<[string, () => void | Promise<void>, RegExp]>([
    ['a cent in the ledger', () => unguarded(`update ledger_line set amount_cents = amount_cents + 1 where ctid = (select min(ctid) from ledger_line)`), /BROKEN +every ledger entry balances .*\n +entry .* 1 cents over/],
    ['a payment that the ledger does not know', () => unguarded(`update payment set kept_cents = 0; update payment set draw_id = (select id from draw limit 1), kept_cents = 5 where id = (select id from payment limit 1)`), /BROKEN +what homeowners owe/],
    ['a word in the record', () => unguarded(`update record_entry set text = replace(text, 'job.created', 'job.creates') where seq = 1 and chain = 'shared'`), /BROKEN +every entry of a record follows/],
    ['a missing last entry', () => unguarded(`delete from record_entry where (job_id, chain, seq) in (select job_id, chain, seq from record_head where chain = 'shared')`), /BROKEN +every record ends where its head says/],
    ['a contract sum', () => unguarded(`update job set changes_approved_cents = changes_approved_cents + 100`), /BROKEN +every contract sum/],
    ['a signature on another paper', () => unguarded(`update change_signature set document_sha256 = repeat('a', 64) where id = (select id from change_signature limit 1)`), /BROKEN +every signature is on the paper/],
    ['a mail that nobody will send', () => unguarded(`update notice set sent_at = null where id = (select min(id::text)::uuid from notice where sent_at is not null)`), /BROKEN +every unsent mail has its job/],
    ['one byte of a paper', async () => flip(await stored('select storage_key as key from document limit 1')), /BROKEN +every stored file .*\n +.*its SHA-256 is/],
    ['a lost photo', async () => rmSync(await stored(`select storage_key as key from file where purpose = 'photo' limit 1`)), /BROKEN +every stored file .*\n[^]*missing/],
  ])('finds in the house %s', async (_what, damage, found) => {
    await damage();
    const done = await operate(house, 'check');
    expect(done.status).toBe(1);
    expect(done.output).toMatch(found);
  });
});

const firstFile = (at: string): string => (JSON.parse(readFileSync(path.join(at, 'files.jsonl'), 'utf8').split('\n')[0] ?? '') as { key: string }).key;

/** Turns one bit round in the middle. */
function flip(file: string): void {
  const content = readFileSync(file);
  const middle = Math.floor(content.length / 2);
  content[middle] = (content[middle] ?? 0) ^ 1;
  writeFileSync(file, content);
}

function renamed(file: string, from: string, to: string): void {
  writeFileSync(file, readFileSync(file, 'utf8').replace(from, to));
}
