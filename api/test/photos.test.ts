import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import sharp from 'sharp';
import type { Photo, PhotoList } from '@tallypole/shared/schemas/photos';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { House, until } from './support/house.ts';
import { jpeg } from './support/photos.ts';
import { smallSchedule } from './support/schedule-builders.ts';
import { download, sha256, upload } from './support/uploads.ts';
import type { Visitor } from './support/visitor.ts';

const SITE = { latitude: 39.4017, longitude: -84.5613 };

describe('photos of a milestone', () => {
  let house: House;
  let principal: Visitor;
  let homeowner: Visitor;
  let inspector: Visitor;
  let designer: Visitor;
  let firmId: string;
  let jobId: string;
  let milestoneId: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    const { url } = await house.web();
    ({ principal, firmId } = await principalWithFirm(house, url));
    ({ id: jobId } = await createJob(principal, firmId));
    ({ Framing: milestoneId } = (await smallSchedule(principal, jobId)).milestoneId);
    [homeowner, inspector, designer] = [await join(principal, jobId, 'homeowner'), await join(principal, jobId, 'inspector'), await join(principal, jobId, 'designer')];
  });
  afterAll(() => house.close());

  const add = (content: Buffer, fields: Record<string, string> = {}, visitor = principal, name = 'IMG_2041.jpg') =>
    upload(visitor, `/jobs/${jobId}/photos`, { id: v7(), milestoneId, ...fields }, { name, content, type: 'image/jpeg' });
  const at = (id: string, size = '') => `/jobs/${jobId}/photos/${id}${size && `/${size}`}`;
  const processed = async (id: string, visitor = principal): Promise<Photo> => {
    let photo = (await visitor.get(at(id))).body as Photo;
    await until(async () => (photo = (await visitor.get(at(id))).body as Photo).state !== 'stored', 'the worker');
    return photo;
  };

  it('keeps the original as it came and shows three sizes without metadata', async () => {
    const original = await jpeg({ width: 4_000, height: 3_000, taken: '2026:11:12 09:30:15', offset: '-05:00', at: { ...SITE, accuracyM: 6.5 } });
    const added = await add(original, { note: 'Second floor joists' });
    expect([added.status, added.body]).toEqual([201, expect.objectContaining({ state: 'stored', sha256: sha256(original), bytes: original.length, note: 'Second floor joists' }) as unknown]);
    const photo = await processed((added.body as Photo).id);
    expect(photo).toMatchObject({ state: 'ready', trouble: null, takenAt: '2026-11-12T14:30:15.000Z', width: 4_000, height: 3_000 });
    expect(photo.place?.latitude).toBeCloseTo(SITE.latitude, 4);
    expect(photo.place?.longitude).toBeCloseTo(SITE.longitude, 4);
    expect(photo.place?.accuracyM).toBe(6.5);
    for (const [size, side] of [['small', 360], ['medium', 1_080], ['large', 2_160]] as const) {
      const shown = await download(homeowner, at(photo.id, size));
      const picture = await sharp(shown.content).metadata();
      expect([shown.status, picture.format, picture.width, picture.exif]).toEqual([200, 'jpeg', side, undefined]);
      expect(shown.headers.get('content-type')).toBe('image/jpeg');
      expect(shown.headers.get('content-disposition')).toBe('inline');
      expect(shown.headers.get('x-content-type-options')).toBe('nosniff');
      expect(shown.headers.get('content-security-policy')).toBe("sandbox; default-src 'none'");
    }
    const kept = await download(homeowner, `/jobs/${jobId}/files/${photo.fileId}`);
    expect([kept.content.equals(original), kept.headers.get('content-disposition')]).toEqual([true, 'attachment; filename=IMG_2041.jpg']);
  });

  it('tells where it was taken to the firm and the homeowner; the inspector and the designer see the picture alone', async () => {
    const { id } = (await add(await jpeg({ scene: 2, at: SITE }))).body as Photo;
    await processed(id);
    for (const visitor of [principal, homeowner]) expect(((await visitor.get(at(id))).body as Photo).place).not.toBeNull();
    for (const visitor of [inspector, designer]) {
      expect(((await visitor.get(at(id))).body as Photo).place).toBeNull();
      expect(((await visitor.get(`/jobs/${jobId}/photos`)).body as PhotoList).items.map(({ place }) => place).filter(Boolean)).toEqual([]);
      expect((await visitor.get(at(id, 'small'))).status).toBe(200);
      expect((await visitor.get(`/jobs/${jobId}/files/${id}`)).status).toBe(404);
    }
  });

  it('reads the camera clock in the zone of the job where it names none, and nothing where there is nothing', async () => {
    const { id } = (await add(await jpeg({ scene: 3, taken: '2026:07:01 08:00:00' }))).body as Photo;
    expect(await processed(id)).toMatchObject({ takenAt: '2026-07-01T12:00:00.000Z', place: null });
    const { id: bare } = (await add(await sharp({ create: { width: 200, height: 100, channels: 3, background: '#446' } }).png().toBuffer())).body as Photo;
    expect(await processed(bare)).toMatchObject({ state: 'ready', takenAt: null, place: null, width: 200 });
    const { id: odd } = (await add(await jpeg({ scene: 4, taken: '0000:00:00 00:00:00', at: { latitude: 0, longitude: 0 } }))).body as Photo;
    expect(await processed(odd)).toMatchObject({ takenAt: null, place: null });
  });

  it('turns a picture upright that was taken on its side', async () => {
    const { id } = (await add(await jpeg({ scene: 5, width: 640, height: 480, orientation: 6 }))).body as Photo;
    expect(await processed(id)).toMatchObject({ width: 480, height: 640 });
    expect(await sharp((await download(principal, at(id, 'small'))).content).metadata()).toMatchObject({ width: 270, height: 360 });
  });

  it('takes the same photo once, from two tries at the same time', async () => {
    const content = await jpeg({ scene: 6 });
    const id = v7();
    const answers = await Promise.all([add(content, { id }), add(content, { id })]);
    expect(answers.map(({ status }) => status)).toEqual([201, 201]);
    expect(await house.sql('select id from photo where id = $1', [id])).toHaveLength(1);
    const other = await add(await jpeg({ scene: 7 }), { id });
    expect([other.status, (other.body as { code: string }).code]).toEqual([409, 'key_reused']);
  });

  it.each([
    ['a text called JPEG', () => Buffer.from('Not a picture at all.'), 415],
    ['a page of markup', () => Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>'), 415],
    ['60 MB', async () => Buffer.concat([await jpeg(), Buffer.alloc(60_000_000)]), 413],
  ])('refuses %s', async (_what, content, status) => {
    expect((await add(await content())).status).toBe(status);
  });

  it.each([
    ['breaks off', async () => (await jpeg({ scene: 8 })).subarray(0, 20_000), /damaged or incomplete/],
    ['claims billions of pixels', async () => claimingSize(await jpeg({ scene: 9, width: 64, height: 64 }), 65_000), /80 million pixels/],
    ['is HEIC', () => Buffer.concat([Buffer.from('\0\0\0\x18ftypheic\0\0\0\0heicmif1', 'latin1'), Buffer.alloc(4_000, 1)]), /HEIC format cannot be shown/],
  ])('says so when a picture %s, and keeps its original', async (_what, content, trouble) => {
    const original = await content();
    const added = await add(original);
    expect(added.status).toBe(201);
    const photo = await processed((added.body as Photo).id);
    expect(photo.state).toBe('unreadable');
    expect(photo.trouble).toMatch(trouble);
    expect((await principal.get(at(photo.id, 'small'))).status).toBe(404);
    expect((await download(principal, `/jobs/${jobId}/files/${photo.fileId}`)).content.equals(original)).toBe(true);
  });

  it('an unreadable picture does not carry a claim', async () => {
    const job = await createJob(principal, firmId);
    const { Finish } = (await smallSchedule(principal, job.id)).milestoneId;
    const { id } = (await upload(principal, `/jobs/${job.id}/photos`, { id: v7(), milestoneId: Finish }, { name: 'a.jpg', content: (await jpeg()).subarray(0, 9_000) })).body as Photo;
    await until(async () => ((await principal.get(`/jobs/${job.id}/photos/${id}`)).body as Photo).state === 'unreadable', 'the worker');
    expect((await principal.post(`/jobs/${job.id}/milestones/${Finish}/claim`, { version: 1 })).status).toBe(422);
  });

  it('refuses who may not, another job’s milestone, and strangers', async () => {
    const content = await jpeg({ scene: 11, width: 200, height: 150 });
    expect((await add(content, {}, homeowner)).status).toBe(403);
    expect((await add(content, {}, inspector)).status).toBe(201);
    const other = await createJob(principal, firmId);
    const { Framing } = (await smallSchedule(principal, other.id)).milestoneId;
    const astray = await add(content, { milestoneId: Framing });
    expect([astray.status, (astray.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([400, '/milestoneId']);
    const { principal: stranger } = await principalWithFirm(house, principal.url);
    const { id } = (await add(content)).body as Photo;
    expect((await add(content, {}, stranger)).status).toBe(404);
    for (const path of [at(id), at(id, 'small'), `/jobs/${jobId}/photos`, `/jobs/${other.id}/photos/${id}`]) expect([path, (await stranger.get(path)).status]).toEqual([path, 404]);
    expect((await principal.get(`/jobs/${other.id}/photos/${id}`)).status).toBe(404);
  });

  it('is weighed by place, time and likeness, anew when the site or the milestone changes, and never names another job', async () => {
    const job = await createJob(principal, firmId);
    const { Framing, Finish } = (await smallSchedule(principal, job.id)).milestoneId;
    const send = async (milestone: string, content: Buffer) =>
      ((await upload(principal, `/jobs/${job.id}/photos`, { id: v7(), milestoneId: milestone }, { name: 'a.jpg', content })).body as Photo).id;
    const results = async (id: string, visitor = principal) => ((await visitor.get(`/jobs/${job.id}/photos/${id}`)).body as Photo).findings.map(({ kind, result }) => `${kind} ${result}`);
    const become = (id: string, wanted: string[]) => until(async () => (await results(id)).join() === wanted.join(), wanted.join());

    const today = new Date().toISOString().slice(0, 10).replaceAll('-', ':');
    const near = await send(Framing, await jpeg({ scene: 21, taken: `${today} 17:00:00`, offset: '+00:00', at: { ...SITE, accuracyM: 8 } }));
    await become(near, ['place unknown', 'time unknown', 'reuse new']);
    const located = await principal.post(`/jobs/${job.id}/site`, { ...SITE, radiusM: 75 });
    expect([located.status, (await principal.get(`/jobs/${job.id}/site`)).body]).toEqual([201, { location: { ...SITE, radiusM: 75 } }]);
    await principal.post(`/jobs/${job.id}/milestones/${Framing}/start`, { version: 1 });
    await become(near, ['place on_site', 'time inside', 'reuse new']);

    // the same wall, smaller and compressed harder, shown again for the finish
    const again = await sharp(await jpeg({ scene: 21 })).resize(900).jpeg({ quality: 55 }).toBuffer();
    const reused = await send(Finish, again);
    await become(reused, ['place unknown', 'time unknown', 'reuse alike']);
    expect(((await principal.get(`/jobs/${job.id}/photos/${reused}`)).body as Photo).findings[2]?.sentence).toMatch(/added before for Framing on /);
    const far = await send(Finish, await jpeg({ scene: 22, taken: '2020:01:01 09:00:00', at: { latitude: SITE.latitude + 0.1, longitude: SITE.longitude } }));
    await become(far, ['place off_site', 'time unknown', 'reuse new']);

    const next = await createJob(principal, firmId);
    const { Foundation } = (await smallSchedule(principal, next.id)).milestoneId;
    const { id: elsewhere } = (await upload(principal, `/jobs/${next.id}/photos`, { id: v7(), milestoneId: Foundation }, { name: 'a.jpg', content: again })).body as Photo;
    await until(async () => ((await principal.get(`/jobs/${next.id}/photos/${elsewhere}`)).body as Photo).findings[2]?.result === 'alike', 'the other job');
    const sentence = ((await principal.get(`/jobs/${next.id}/photos/${elsewhere}`)).body as Photo).findings[2]?.sentence;
    expect(sentence).toMatch(/added before elsewhere/);
    expect(sentence).not.toContain('Framing');
    const guest = await join(principal, job.id, 'inspector');
    expect(await results(near, guest)).toEqual(['place on_site', 'time inside', 'reuse new']);
    expect((await guest.get(`/jobs/${job.id}/site`)).status).toBe(403);
    expect((await guest.post(`/jobs/${job.id}/site`, { ...SITE, radiusM: 75 })).status).toBe(403);
  });

  it('lists them newest first, page by page', async () => {
    const seen: string[] = [];
    let next: string | null = '';
    while (next !== null) {
      const page: PhotoList = (await principal.get(`/jobs/${jobId}/photos?limit=4&milestoneId=${milestoneId}${next && `&cursor=${next}`}`)).body as PhotoList;
      seen.push(...page.items.map(({ id }) => id));
      ({ next } = page);
    }
    const all = await house.sql<{ id: string }>('select id from photo where milestone_id = $1 order by created_at desc, id desc', [milestoneId]);
    expect(seen).toEqual(all.map(({ id }) => id));
    expect(seen.length).toBeGreaterThan(8);
  });
});

/** A JPEG whose frame header claims to be as wide and high as given. */
function claimingSize(picture: Buffer, side: number): Buffer {
  const frame = picture.findIndex((byte, i) => byte === 0xff && (picture[i + 1] === 0xc0 || picture[i + 1] === 0xc2));
  const bomb = Buffer.from(picture);
  bomb.writeUInt16BE(side, frame + 5);
  bomb.writeUInt16BE(side, frame + 7);
  return bomb;
}
