import { randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream } from 'node:fs';
import { link, mkdir, open, rm } from 'node:fs/promises';
import path from 'node:path';
import type { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import type { FileStorage } from './file-storage.ts';
import { checkedKey } from './storage-key.ts';

/** Files under one folder. A file appears whole or not at all: it is written beside its place, synced and then linked to its name. */
export class LocalDiskStorage implements FileStorage {
  private readonly folder: string;

  constructor(folder: string) {
    this.folder = path.resolve(folder);
  }

  async put(key: string, content: Readable): Promise<void> {
    const target = this.pathOf(key);
    const arriving = path.join(this.folder, 'arriving', randomUUID());
    await Promise.all([mkdir(path.dirname(target), { recursive: true }), mkdir(path.dirname(arriving), { recursive: true })]);
    try {
      await pipeline(content, createWriteStream(arriving, { flags: 'wx', mode: 0o600, flush: true }));
      await link(arriving, target);
      await sync(path.dirname(target));
    } finally {
      await rm(arriving, { force: true });
    }
  }

  async get(key: string): Promise<Readable> {
    const handle = await open(this.pathOf(key), 'r');
    return createReadStream('', { fd: handle });
  }

  async remove(key: string): Promise<void> {
    await rm(this.pathOf(key), { force: true });
  }

  private pathOf(key: string): string {
    return path.join(this.folder, checkedKey(key));
  }
}

/** The name in its folder is durable only when the folder is. */
async function sync(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  await handle.sync().finally(() => handle.close());
}
