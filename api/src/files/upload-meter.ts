import { createHash } from 'node:crypto';
import { Transform, type TransformCallback } from 'node:stream';
import { HEAD_BYTES } from './media-kind.ts';

/** Lets bytes through and remembers how many, their SHA-256 and the first of them. */
export class UploadMeter extends Transform {
  bytes = 0;
  private readonly hash = createHash('sha256');
  private readonly heads: Buffer[] = [];
  private headBytes = 0;

  override _transform(chunk: Buffer, _encoding: BufferEncoding, done: TransformCallback): void {
    this.bytes += chunk.length;
    this.hash.update(chunk);
    if (this.headBytes < HEAD_BYTES) {
      this.heads.push(chunk);
      this.headBytes += chunk.length;
    }
    done(null, chunk);
  }

  get head(): Buffer {
    return Buffer.concat(this.heads).subarray(0, HEAD_BYTES);
  }

  /** Call once, when everything has passed. */
  sha256(): string {
    return this.hash.digest('hex');
  }
}
