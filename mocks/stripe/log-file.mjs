import {
  closeSync,
  existsSync,
  fdatasyncSync,
  fsyncSync,
  ftruncateSync,
  mkdirSync,
  openSync,
  readFileSync,
} from 'node:fs';
import { renameSync, writeSync } from 'node:fs';
import path from 'node:path';

/**
 * One file of JSON lines that is only appended to. A line is on the disk before `append` returns; a line that a crash
 * cut short was never acknowledged and is left out on reading.
 */
export class LogFile {
  /** @param {string} folder made when it is missing */
  constructor(folder) {
    mkdirSync(folder, { recursive: true });
    this.folder = folder;
    this.file = path.join(folder, 'state.jsonl');
    this.size = 0;
    this.written = 0;
    /** @type {number | undefined} */
    this.handle = undefined;
  }

  /** @returns {unknown[]} every whole line; throws when one in the middle can't be read */
  read() {
    if (!existsSync(this.file)) return [];
    const text = readFileSync(this.file, 'utf8');
    const lines = text.split('\n');
    lines.pop(); // either empty, or torn by a crash before its end was written
    return lines.map((line, index) => {
      try {
        return /** @type {unknown} */ (JSON.parse(line));
      } catch {
        throw new Error(`${this.file}: line ${index + 1} can't be read; the file was changed or the disk is damaged`);
      }
    });
  }

  /**
   * Replaces the file by these lines in one step: whoever reads sees the old file or the new one.
   * @param {unknown[]} lines
   */
  rewrite(lines) {
    const next = `${this.file}.next`;
    const handle = openSync(next, 'w', 0o600);
    const bytes = Buffer.from(lines.map((line) => `${JSON.stringify(line)}\n`).join(''));
    writeWhole(handle, bytes);
    fsyncSync(handle);
    renameSync(next, this.file);
    const folder = openSync(this.folder, 'r');
    fsyncSync(folder);
    closeSync(folder);
    if (this.handle !== undefined) closeSync(this.handle);
    this.handle = handle;
    this.size = bytes.length;
    this.written = 0;
  }

  /** @param {unknown} line */
  append(line) {
    if (this.handle === undefined) throw new Error('The store is closed');
    const bytes = Buffer.from(`${JSON.stringify(line)}\n`);
    try {
      writeWhole(this.handle, bytes, this.size);
      fdatasyncSync(this.handle);
    } catch (error) {
      // A full disk may have taken half of the line: it must not stand before the next one.
      ftruncateSync(this.handle, this.size);
      throw error;
    }
    this.size += bytes.length;
    this.written += bytes.length;
  }

  close() {
    if (this.handle !== undefined) closeSync(this.handle);
    this.handle = undefined;
  }
}

/**
 * @param {number} handle
 * @param {Buffer} bytes
 * @param {number} [position]
 */
function writeWhole(handle, bytes, position = 0) {
  for (let done = 0; done < bytes.length;) done += writeSync(handle, bytes, done, bytes.length - done, position + done);
}
