import type { Readable } from 'node:stream';

/** Where bytes are kept. Keys are made by the server: <firm>/<job>/<yyyy>/<uuid>. A folder or a bucket, as the configuration says. */
export interface FileStorage {
  /** Keeps everything the stream gives, or nothing: resolves when it is durable. An existing key is never written over: that rejects with code EEXIST. */
  put(key: string, content: Readable): Promise<void>;
  /** Opens what was kept. Rejects with code ENOENT where nothing stands under the key. */
  get(key: string): Promise<Readable>;
  /** Forgets a key; nothing happens where there is none. */
  remove(key: string): Promise<void>;
}

/** Injection token of the storage. */
export const FILE_STORAGE = Symbol('file storage');
