import { inflateRawSync } from 'node:zlib';
import { CAPS } from './caps.ts';

const END_OF_DIRECTORY = 0x06054b50;
const DIRECTORY_ENTRY = 0x02014b50;
const LOCAL_ENTRY = 0x04034b50;
const STORED = 0;
const DEFLATED = 8;

/**
 * Whether everything in a ZIP archive together stays within the cap once unpacked. What the directory claims is not believed: each entry
 * is really inflated, up to what is left. Archives that are encrypted, larger than 4 GB or otherwise unusual count as not within.
 */
export function unpacksWithin(archive: Buffer, most: number): boolean {
  try {
    const entries = directoryOf(archive);
    if (!entries || entries.length > CAPS.zipEntries) return false;
    let left = most;
    for (const entry of entries) {
      left -= unpackedSize(archive, entry, left);
      if (left < 0) return false;
    }
    return true;
  } catch {
    // out of range or not inflatable within what was left
    return false;
  }
}

interface Entry {
  method: number;
  packed: number;
  at: number;
}

function directoryOf(archive: Buffer): Entry[] | undefined {
  const end = archive.lastIndexOf(Buffer.from([0x50, 0x4b, 0x05, 0x06]));
  if (end < 0 || archive.readUInt32LE(end) !== END_OF_DIRECTORY) return undefined;
  const count = archive.readUInt16LE(end + 10);
  let at = archive.readUInt32LE(end + 16);
  return Array.from({ length: count }, () => {
    if (archive.readUInt32LE(at) !== DIRECTORY_ENTRY) throw new RangeError('not a directory entry');
    const entry = { method: archive.readUInt16LE(at + 10), packed: archive.readUInt32LE(at + 20), at: archive.readUInt32LE(at + 42) };
    at += 46 + archive.readUInt16LE(at + 28) + archive.readUInt16LE(at + 30) + archive.readUInt16LE(at + 32);
    return entry;
  });
}

function unpackedSize(archive: Buffer, { method, packed, at }: Entry, most: number): number {
  if (archive.readUInt32LE(at) !== LOCAL_ENTRY) throw new RangeError('not an entry');
  const begin = at + 30 + archive.readUInt16LE(at + 26) + archive.readUInt16LE(at + 28);
  if (method === STORED) return packed;
  if (method !== DEFLATED) throw new RangeError('not a known way of packing');
  return inflateRawSync(archive.subarray(begin, begin + packed), { maxOutputLength: Math.max(1, most) }).length;
}
