import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, createWriteStream, existsSync, mkdirSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';

/**
 * @typedef {{ key: string, bytes: number, etag: string, type: string, modified: string }} Stored
 * @typedef {{ md5: string, sha256: string, bytes: number, file: string }} Arrived
 */

const hashed = (/** @type {string} */ key) => createHash('sha256').update(key).digest('hex');

/** What the stand-in keeps, as files that survive a restart. An object is there when its description is: it is written last. */
export class Shelf {
  /** @param {string} folder */
  constructor(folder) {
    this.objects = path.join(folder, 'objects');
    this.uploads = path.join(folder, 'uploads');
    this.arriving = path.join(folder, 'arriving');
    for (const part of [this.objects, this.uploads, this.arriving]) mkdirSync(part, { recursive: true });
  }

  /** @param {string} key @returns {Stored | undefined} */
  find(key) {
    const file = this.#description(key);
    return existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : undefined;
  }

  /** @returns {Stored[]} */
  all() {
    return readdirSync(this.objects).filter((name) => name.endsWith('.json')).map((name) => JSON.parse(readFileSync(path.join(this.objects, name), 'utf8')));
  }

  /** @param {string} key @param {{ start: number, end: number } | undefined} range */
  read(key, range) {
    return createReadStream(this.#content(key), range);
  }

  /**
   * Writes a body down beside everything; it counts for nothing until it is kept.
   * @param {import('node:stream').Readable} body
   * @returns {Promise<Arrived>}
   */
  async arrive(body) {
    const file = path.join(this.arriving, randomUUID());
    const [md5, sha256] = [createHash('md5'), createHash('sha256')];
    let bytes = 0;
    const meter = new Transform({
      transform(chunk, _encoding, done) {
        for (const hash of [md5, sha256]) hash.update(chunk);
        bytes += chunk.length;
        done(null, chunk);
      },
    });
    try {
      await pipeline(body, meter, createWriteStream(file));
    } catch (error) {
      rmSync(file, { force: true });
      throw error;
    }
    return { file, bytes, md5: md5.digest('hex'), sha256: sha256.digest('hex') };
  }

  /** @param {string} key @param {Arrived} arrived @param {string} type @param {string} [etag] @returns {Stored} */
  keep(key, arrived, type, etag = arrived.md5) {
    const stored = { key, bytes: arrived.bytes, etag: `"${etag}"`, type, modified: new Date().toUTCString() };
    renameSync(arrived.file, this.#content(key));
    writeFileSync(this.#description(key), JSON.stringify(stored));
    return stored;
  }

  /** @param {Arrived} arrived */
  forget(arrived) {
    rmSync(arrived.file, { force: true });
  }

  /** @param {string} key */
  remove(key) {
    rmSync(this.#description(key), { force: true });
    rmSync(this.#content(key), { force: true });
  }

  /** @param {string} key @param {string} type */
  openUpload(key, type) {
    const id = randomUUID();
    mkdirSync(path.join(this.uploads, id));
    writeFileSync(path.join(this.uploads, id, 'upload.json'), JSON.stringify({ key, type }));
    return id;
  }

  /** @param {string} id @param {string} key @returns {{ key: string, type: string } | undefined} */
  upload(id, key) {
    const file = path.join(this.uploads, path.basename(id), 'upload.json');
    const upload = existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : undefined;
    return upload?.key === key ? upload : undefined;
  }

  openUploads() {
    return readdirSync(this.uploads);
  }

  /** @param {string} id @param {number} number @param {Arrived} arrived */
  keepPart(id, number, arrived) {
    renameSync(arrived.file, path.join(this.uploads, id, `${number}.part`));
    writeFileSync(path.join(this.uploads, id, `${number}.json`), JSON.stringify({ bytes: arrived.bytes, md5: arrived.md5 }));
  }

  /** @param {string} id @param {number} number @returns {{ bytes: number, md5: string, file: string } | undefined} */
  part(id, number) {
    const file = path.join(this.uploads, id, `${number}.json`);
    return existsSync(file) ? { ...JSON.parse(readFileSync(file, 'utf8')), file: path.join(this.uploads, id, `${number}.part`) } : undefined;
  }

  /** @param {string} id */
  closeUpload(id) {
    rmSync(path.join(this.uploads, path.basename(id)), { recursive: true, force: true });
  }

  /** @param {string} key */
  #content = (key) => path.join(this.objects, hashed(key));
  /** @param {string} key */
  #description = (key) => `${this.#content(key)}.json`;
}
