import { randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import sharp from 'sharp';
import { photoSizes } from '@tallypole/shared/schemas/photos';
import { LocalDiskStorage } from '../../src/files/local-disk-storage.ts';
import { newStorageKey } from '../../src/files/storage-key.ts';
import { readOrigin } from '../../src/photos/read-exif.ts';
import { renderSizes } from '../../src/photos/render-sizes.ts';
import { jpeg } from '../support/photos.ts';
import { byTurns, note, timed } from './rows.ts';

it('a photo of 12 megapixels, against sharp alone', async () => {
  const folder = mkdtempSync(path.join(tmpdir(), 'tally-bench-'));
  const storage = new LocalDiskStorage(folder);
  const picture = await jpeg({ width: 4_000, height: 3_000, taken: '2026:11:12 09:30:15', offset: '-05:00', at: { latitude: 39.4, longitude: -84.5, accuracyM: 8 } });
  let count = 0;
  const store = async (content: Buffer) => {
    count += 1;
    await storage.put(newStorageKey(randomUUID(), randomUUID(), new Date()), Readable.from([content]));
  };
  const ours = () =>
    timed(async () => {
      await store(picture);
      await readOrigin(picture, 'America/New_York');
      for (const { content } of (await renderSizes(picture, 'image/jpeg')).sizes) await store(content);
    });
  const alone = () =>
    timed(async () => {
      for (const side of Object.values(photoSizes)) await sharp(picture).autoOrient().resize(side, side, { fit: 'inside' }).jpeg({ quality: 80, progressive: true }).toBuffer();
    });
  await ours();
  await alone();
  const [product, bare] = await byTurns(5, ours, alone);
  rmSync(folder, { recursive: true });
  note({ what: 'a 12-megapixel photo: stored, read, hashed, three sizes', against: 'sharp alone, three sizes', ratio: product / bare, target: '≤ 1.5', met: product / bare <= 1.5, seen: `${Math.round(product)} and ${Math.round(bare)} ms` });
  expect(count).toBeGreaterThan(0);
});
