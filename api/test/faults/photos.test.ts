import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { readdirSync } from 'node:fs';
import { v7 } from 'uuid';
import { createJob, principalWithFirm } from '../support/builders.ts';
import { House, until } from '../support/house.ts';
import { jpeg } from '../support/photos.ts';
import { smallSchedule } from '../support/schedule-builders.ts';
import { upload } from '../support/uploads.ts';

describe('photos whose worker is killed', () => {
  let house: House;
  beforeAll(async () => {
    house = await House.open();
  });
  afterAll(() => house.close());

  it('are read by the next one, each once', async () => {
    const { url, child: web } = await house.web();
    const mailer = await house.worker();
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const { Framing: milestoneId } = (await smallSchedule(principal, job.id)).milestoneId;
    await house.kill(mailer);
    for (let scene = 1; scene <= 12; scene += 1) {
      const answer = await upload(principal, `/jobs/${job.id}/photos`, { id: v7(), milestoneId }, { name: `${scene}.jpg`, content: await jpeg({ scene, width: 3_000, height: 2_000 }) });
      expect(answer.status).toBe(201);
    }
    // the web process may die too: what was acknowledged is kept
    await house.kill(web);
    const first = await house.worker();
    await until(async () => (await ready()) > 0, 'the first photo');
    await house.kill(first);
    expect(await ready()).toBeLessThan(12);
    await house.worker();
    await until(async () => (await ready()) === 12, 'the other photos', 30_000);
    const rows = await house.sql<{ n: number }>('select jsonb_array_length(sizes) as n from photo');
    expect(rows.map(({ n }) => n)).toEqual(Array.from({ length: 12 }, () => 3));
    const known = await house.sql<{ key: string }>(`select storage_key as key from file union all select s->>'key' from photo, jsonb_array_elements(sizes) s`);
    const kept = readdirSync(house.env['FILES_DIR'] ?? '', { recursive: true, encoding: 'utf8' });
    expect(known.filter(({ key }) => !kept.includes(key))).toEqual([]);
  });

  const ready = async () => (await house.sql<{ n: number }>(`select count(*)::int as n from photo where state = 'ready'`))[0]?.n ?? 0;
});
