import exifr from 'exifr';
import { instantIn } from './zoned-time.ts';

export interface PictureOrigin {
  takenAt: Date | null;
  latitude: number | null;
  longitude: number | null;
  accuracyM: number | null;
}

const UNKNOWN: PictureOrigin = { takenAt: null, latitude: null, longitude: null, accuracyM: null };
const OPTIONS = { tiff: true, ifd0: {}, exif: true, gps: true, xmp: false, icc: false, iptc: false, jfif: false, ihdr: false, reviveValues: false, translateValues: false, mergeOutput: true } as const;

/**
 * When and where a picture says it was taken. A camera's clock has no zone unless it says so: then the job's counts. Whatever is missing,
 * odd or unreadable is unknown; it never fails.
 */
export async function readOrigin(picture: Buffer, timeZone: string): Promise<PictureOrigin> {
  const tags = await exifr.parse(picture, OPTIONS).then((found: unknown) => (found ?? {}) as Record<string, unknown>, () => null);
  if (!tags) return UNKNOWN;
  const [latitude, longitude] = [within(tags['latitude'], 90), within(tags['longitude'], 180)];
  // 0, 0 is what a phone without a fix writes
  const known = latitude !== null && longitude !== null && (latitude !== 0 || longitude !== 0);
  const accuracy = within(tags['GPSHPositioningError'], 1_000_000);
  return {
    takenAt: takenAt(tags, timeZone),
    latitude: known ? latitude : null,
    longitude: known ? longitude : null,
    accuracyM: known && accuracy !== null && accuracy > 0 ? accuracy : null,
  };
}

const text = (value: unknown): string => (typeof value === 'string' ? value : '');
const within = (value: unknown, most: number): number | null => (typeof value === 'number' && Math.abs(value) <= most ? value : null);

function takenAt(tags: Record<string, unknown>, timeZone: string): Date | null {
  const wall = /^(\d{4}):(\d{2}):(\d{2})[ T](\d{2}:\d{2}:\d{2})/.exec(text(tags['DateTimeOriginal'] ?? tags['CreateDate']));
  if (!wall) return null;
  const local = `${wall[1]}-${wall[2]}-${wall[3]}T${wall[4]}`;
  const zone = /^[+-]\d{2}:\d{2}/.exec(text(tags['OffsetTimeOriginal'] ?? tags['OffsetTime']))?.[0];
  if (Number.isNaN(Date.parse(`${local}Z`))) return null;
  const instant = zone ? new Date(`${local}${zone}`) : instantIn(timeZone, local);
  const year = instant.getUTCFullYear();
  return year >= 1990 && year <= 2100 ? instant : null;
}
