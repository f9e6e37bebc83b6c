import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { buffer } from 'node:stream/consumers';
import type { StorageSettings } from '../src/common/configuration.ts';
import { readStorageSettings } from '../src/common/configuration.ts';
import type { FileStorage } from '../src/files/file-storage.ts';
import { storageOf } from '../src/files/storage-of.ts';
import { StorageStandIn } from './support/storage-stand-in.ts';

const key = () => `${randomUUID()}/${randomUUID()}/2026/${randomUUID()}`;
const MEGABYTE = 1_048_576;
const sha256 = (content: Buffer) => createHash('sha256').update(content).digest('hex');
const chunks = (content: Buffer, size = 65_536) => Readable.from(Array.from({ length: Math.ceil(content.length / size) }, (_, i) => content.subarray(i * size, (i + 1) * size)));

interface Place {
  settings: StorageSettings;
  /** Keys and half-done things that are there. */
  left(): Promise<string[]>;
  close(): Promise<void>;
}

async function folder(): Promise<Place> {
  const at = mkdtempSync(path.join(tmpdir(), 'tally-files-'));
  const left = () => readdirSync(at, { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile()).map((entry) => path.relative(at, path.join(entry.parentPath, entry.name)));
  return { settings: readStorageSettings({ FILES_DIR: at }), left: () => Promise.resolve(left()), close: () => Promise.resolve(rmSync(at, { recursive: true })) };
}

let standIn: StorageStandIn;
async function bucket(): Promise<Place> {
  standIn = await StorageStandIn.open();
  const left = async () => {
    const { objects, uploads } = await standIn.kept();
    return [...objects.map(({ key: name }) => name), ...uploads];
  };
  return { settings: readStorageSettings(standIn.env), left, close: () => standIn.close() };
}

describe.each([
  ['a folder', folder],
  ['a bucket', bucket],
])('files in %s', (_name, open) => {
  let place: Place;
  let storage: FileStorage;
  beforeAll(async () => {
    place = await open();
    storage = await storageOf(place.settings);
  });
  afterAll(() => place.close());

  it.each([
    ['nothing at all', 0],
    ['a few bytes', 17],
    // one part of a bucket has 5 MB
    ['just one part', 5 * MEGABYTE],
    ['three parts and a bit', 15 * MEGABYTE + 3],
  ])('keeps %s and gives it back as it was', async (_what, bytes) => {
    const content = randomBytes(bytes);
    const at = key();
    await storage.put(at, chunks(content));
    expect(sha256(await buffer(await storage.get(at)))).toBe(sha256(content));
    expect(await place.left()).toContain(at);
  });

  it('gives back a stream, not the whole', async () => {
    const at = key();
    await storage.put(at, chunks(randomBytes(8 * MEGABYTE)));
    const sizes: number[] = [];
    for await (const chunk of await storage.get(at)) sizes.push((chunk as Buffer).length);
    expect(sizes.length).toBeGreaterThan(4);
  });

  it('says of a missing key that nothing is there', async () => {
    await expect(storage.get(key())).rejects.toMatchObject({ code: 'ENOENT' });
  });

  it('never writes over what is there', async () => {
    const at = key();
    await storage.put(at, Readable.from([Buffer.from('first')]));
    await expect(storage.put(at, Readable.from([Buffer.from('second')]))).rejects.toMatchObject({ code: 'EEXIST' });
    expect((await buffer(await storage.get(at))).toString()).toBe('first');
  });

  it('forgets a key, and a missing one too', async () => {
    const at = key();
    await storage.put(at, Readable.from([Buffer.from('gone soon')]));
    await storage.remove(at);
    await storage.remove(at);
    await expect(storage.get(at)).rejects.toMatchObject({ code: 'ENOENT' });
  });

  it.each([
    ['in the first part', 1],
    ['in the third part', 11],
  ])('leaves nothing of an upload that breaks off %s', async (_where, megabytes) => {
    const before = await place.left();
    async function* breaking() {
      for (let sent = 0; sent < megabytes; sent += 1) yield await Promise.resolve(randomBytes(MEGABYTE));
      throw new Error('The sender went away.');
    }
    await expect(storage.put(key(), Readable.from(breaking()))).rejects.toThrow('The sender went away.');
    expect(await place.left()).toEqual(before);
  });

  it.each(['../../../etc/passwd', 'a/b/2026/c', `${key()}/more`, ''])('refuses %j as a key', async (wrong) => {
    await expect(storage.put(wrong, Readable.from(['x']))).rejects.toThrow('no storage key');
    await expect(storage.get(wrong)).rejects.toThrow('no storage key');
    await expect(storage.remove(wrong)).rejects.toThrow('no storage key');
  });
});

describe('a bucket with troubles', () => {
  let place: Place;
  let storage: FileStorage;
  beforeAll(async () => {
    place = await bucket();
    storage = await storageOf(place.settings);
  });
  beforeEach(() => standIn.faultsOver());
  afterAll(() => place.close());

  it('keeps what it has when it stops and starts', async () => {
    const at = key();
    await storage.put(at, Readable.from([Buffer.from('still here')]));
    await standIn.stop();
    await expect(storage.get(at)).rejects.toMatchObject({ code: 'busy', status: 503 });
    await standIn.start();
    expect((await buffer(await storage.get(at))).toString()).toBe('still here');
  });

  it.each([
    ['the secret', { S3_SECRET_ACCESS_KEY: 'another-secret-key-of-tests' }],
    ['the name of the key', { S3_ACCESS_KEY_ID: 'somebody-else' }],
    ['the bucket', { S3_BUCKET: 'other-bucket' }],
  ])('refuses others who have %s wrong, for reading and writing', async (_what, wrong) => {
    const stranger = await storageOf(readStorageSettings({ ...standIn.env, ...wrong }));
    const at = key();
    await storage.put(at, Readable.from([Buffer.from('ours')]));
    const before = await place.left();
    await expect(stranger.get(at)).rejects.toMatchObject({ code: 'busy' });
    await expect(stranger.remove(at)).rejects.toMatchObject({ code: 'busy' });
    await expect(stranger.put(key(), Readable.from(['x']))).rejects.toMatchObject({ code: 'busy' });
    expect(await place.left()).toEqual(before);
  });

  it.each([
    ['PUT', 'error'],
    ['PUT', 'slow_down'],
    ['PUT', 'drop'],
    ['PUT', 'drop_after'],
    ['GET', 'error'],
    ['GET', 'drop'],
  ])('tries again when a %s meets %s once', async (method, mode) => {
    const at = key();
    await standIn.fault(mode, { method });
    await storage.put(at, Readable.from([Buffer.from('whole')]));
    expect((await buffer(await storage.get(at))).toString()).toBe('whole');
    expect((await standIn.kept()).faults).toEqual([]);
  });

  it('gives up after three tries of each part and leaves nothing', async () => {
    const before = await place.left();
    await standIn.fault('slow_down', { method: 'PUT', times: 9 });
    await expect(storage.put(key(), chunks(randomBytes(11 * MEGABYTE)))).rejects.toMatchObject({ code: 'busy' });
    expect(await place.left()).toEqual(before);
  });

  it('never takes half of an answer for the whole', async () => {
    const at = key();
    await storage.put(at, chunks(randomBytes(MEGABYTE)));
    await standIn.fault('cut', { method: 'GET' });
    await expect(storage.get(at).then(buffer)).rejects.toThrow();
  });
});
