import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 } from 'uuid';
import type { StoredFile } from '@tallypole/shared/schemas/files';
import { createJob, principalWithFirm } from '../support/builders.ts';
import { made } from '../support/draw-builders.ts';
import { House, until } from '../support/house.ts';
import { jpeg } from '../support/photos.ts';
import { smallSchedule } from '../support/schedule-builders.ts';
import { StorageStandIn } from '../support/storage-stand-in.ts';
import { download, pdf, sha256, upload } from '../support/uploads.ts';
import type { Visitor } from '../support/visitor.ts';

const MEGABYTE = 1_048_576;
const large = (megabytes: number) => Buffer.concat([pdf(), Buffer.alloc(megabytes * MEGABYTE)]);
interface Problem {
  code: string;
  detail: string;
}

/** A folder with room for so many bytes: a file system of its own, which only root may make. */
function smallDisk(megabytes: number): string | undefined {
  const at = mkdtempSync(path.join(tmpdir(), 'tally-small-'));
  if (spawnSync('mount', ['-t', 'tmpfs', '-o', `size=${megabytes}m`, 'tmpfs', at]).status === 0) return at;
  rmSync(at, { recursive: true });
  return undefined;
}

const disk = smallDisk(6);
const onSmallDisk = disk === undefined ? it.skip : it;

describe('a disk that is full', () => {
  let house: House;
  let principal: Visitor;
  let jobId: string;
  const files = path.join(disk ?? '', 'files');

  beforeAll(async () => {
    house = await House.open({ FILES_DIR: files, LOG_LEVEL: 'silent' });
    await house.worker();
    const { url } = await house.web();
    const firm = await principalWithFirm(house, url);
    ({ principal } = firm);
    ({ id: jobId } = await createJob(principal, firm.firmId));
  });
  afterAll(async () => {
    await house.close();
    if (disk === undefined) return;
    spawnSync('umount', ['-l', disk]);
    rmSync(disk, { recursive: true, force: true });
  });

  const add = (content: Buffer, id = v7()) => upload(principal, `/jobs/${jobId}/files`, { id, purpose: 'other' }, { name: 'plan.pdf', content });
  const kept = () => readdirSync(files, { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile()).length;

  onSmallDisk('refuses an upload in a sentence, keeps nothing of it, and takes it when there is room again (skipped where no small file system can be mounted)', async () => {
    const first = made<StoredFile>(await add(pdf('fits')));
    const filler = path.join(disk ?? '', 'filler');
    writeFileSync(filler, Buffer.alloc(3 * MEGABYTE));
    const [id, content] = [v7(), large(4)];
    const refused = await add(content, id);
    expect([refused.status, (refused.body as Problem).code]).toEqual([507, 'no_room']);
    expect((refused.body as Problem).detail).toBe('There is no room for files at the moment. Nothing was kept; try again later.');
    expect(kept()).toBe(1);
    expect(await house.sql('select 1 from file')).toHaveLength(1);
    expect((await download(principal, `/jobs/${jobId}/files/${first.id}`)).content.equals(pdf('fits'))).toBe(true);
    rmSync(filler);
    expect(made<StoredFile>(await add(content, id)).sha256).toBe(sha256(content));
    expect(kept()).toBe(2);
  });
});

describe('a bucket that is down', () => {
  let house: House;
  let standIn: StorageStandIn;
  let principal: Visitor;
  let elsewhere: Visitor;
  let jobId: string;
  let milestoneId: string;

  beforeAll(async () => {
    standIn = await StorageStandIn.open();
    house = await House.open({ ...standIn.env, LOG_LEVEL: 'silent' });
    await house.worker();
    const [{ url }, { url: second }] = [await house.web(), await house.web()];
    const firm = await principalWithFirm(house, url);
    ({ principal } = firm);
    elsewhere = principal.at(second);
    ({ id: jobId } = await createJob(principal, firm.firmId));
    milestoneId = (await smallSchedule(principal, jobId)).milestoneId.Framing;
  });
  afterAll(async () => {
    await house.close();
    await standIn.close();
  });

  const photos = async () => (await house.sql<{ n: number }>(`select count(*)::int as n from photo where state = 'ready'`))[0]?.n;

  it('serves what one server stored from another, and the sizes that the worker made', async () => {
    const content = large(11);
    const { id } = made<StoredFile>(await upload(principal, `/jobs/${jobId}/files`, { id: v7(), purpose: 'other' }, { name: 'set of plans.pdf', content }));
    expect(sha256((await download(elsewhere, `/jobs/${jobId}/files/${id}`)).content)).toBe(sha256(content));
    made(await upload(principal, `/jobs/${jobId}/photos`, { id: v7(), milestoneId }, { name: 'a.jpg', content: await jpeg({ width: 900, height: 600 }) }));
    await until(async () => (await photos()) === 1, 'the photo');
    expect((await standIn.kept()).uploads).toEqual([]);
  });

  it('refuses uploads in a sentence and lets everything else go on; then they work, and a photo that waited is made ready once', async () => {
    const photoId = v7();
    made(await upload(principal, `/jobs/${jobId}/photos`, { id: photoId, milestoneId }, { name: 'b.jpg', content: await jpeg({ scene: 2, width: 900, height: 600 }) }));
    await standIn.stop();
    const [id, content] = [v7(), pdf('later')];
    const send = () => upload(principal, `/jobs/${jobId}/files`, { id, purpose: 'other' }, { name: 'later.pdf', content });
    const refused = await send();
    expect([refused.status, (refused.body as Problem).code, Number(refused.headers['retry-after']) > 0]).toEqual([503, 'busy', true]);
    expect((refused.body as Problem).detail).toBe('Files cannot be kept or opened just now. Try again in a moment; nothing was changed.');
    expect((await principal.get(`/jobs/${jobId}`)).status).toBe(200);
    expect((await fetch(`${principal.url}/api/health/ready`)).status).toBe(200);
    await standIn.start();
    made(await send());
    await until(async () => (await photos()) === 2, 'the photo that waited', 60_000);
    const known = await house.sql<{ key: string }>(`select storage_key as key from file union all select s->>'key' from photo, jsonb_array_elements(sizes) s order by key`);
    expect((await standIn.kept()).objects.map(({ key }) => key).sort()).toEqual(known.map(({ key }) => key));
  });
});

describe('a mail server that is away for a while', () => {
  it('gets every mail once when it is back', async () => {
    const house = await House.open({ LOG_LEVEL: 'silent' });
    try {
      await house.worker();
      const { url } = await house.web();
      const { principal, firmId } = await principalWithFirm(house, url);
      const job = await createJob(principal, firmId);
      await house.mail.stop();
      const guests = Array.from({ length: 12 }, (_, i) => `away${i}@people.example`);
      for (const email of guests) made(await principal.post(`/jobs/${job.id}/invitations`, { id: v7(), email, name: 'Pat Rowe', role: 'homeowner' }));
      await until(async () => (await house.asQueueOwner(`select 1 from graphile_worker.jobs where task_identifier = 'send_notice' and attempts > 0`)).length >= guests.length, 'a first try of each');
      expect((await house.sql<{ n: number }>('select count(*)::int as n from notice where sent_at is not null'))[0]?.n).toBe(0);
      await house.mail.startAgain();
      for (const email of guests) await house.mail.wait(email, /invites you/, 40_000);
      await until(async () => (await house.sql<{ n: number }>('select count(*)::int as n from notice where sent_at is null'))[0]?.n === 0, 'all mails to be marked');
      expect(guests.map((email) => house.mail.to(email).length)).toEqual(guests.map(() => 1));
    } finally {
      await house.close();
    }
  });
});
