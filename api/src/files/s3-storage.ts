import { DeleteObjectCommand, GetObjectCommand, NoSuchKey, S3Client } from '@aws-sdk/client-s3';
import { Upload } from '@aws-sdk/lib-storage';
import type { Readable } from 'node:stream';
import type { FileStorage } from './file-storage.ts';
import { checkedKey } from './storage-key.ts';
import { StorageTrouble } from './storage-trouble.ts';

export interface S3Settings {
  /** Left out: Amazon's own, by the region. */
  endpoint: string | undefined;
  region: string;
  bucket: string;
  accessKeyId: string;
  secretAccessKey: string;
  /** The bucket as the first part of the path instead of the host's name, as most other stores want it. */
  pathStyle: boolean;
}

/** Parts in memory at once; each has 5 MB, the least that a store takes. */
const PARTS_AT_ONCE = 2;
const CONNECT_MS = 5_000;
const ANSWER_MS = 20_000;

/** Files in an S3-compatible bucket. An object appears whole or not at all: what is larger than a part arrives in parts that count for nothing until all are there. */
export class S3Storage implements FileStorage {
  private readonly client: S3Client;
  private readonly bucket: string;

  constructor({ endpoint, region, bucket, accessKeyId, secretAccessKey, pathStyle }: S3Settings) {
    // the SDK tells about Node 20 at every start, where nobody can act on it
    process.env['AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED'] ??= 'true';
    this.bucket = bucket;
    this.client = new S3Client({
      ...(endpoint ? { endpoint } : {}),
      region,
      credentials: { accessKeyId, secretAccessKey },
      forcePathStyle: pathStyle,
      maxAttempts: 3,
      requestHandler: { connectionTimeout: CONNECT_MS, requestTimeout: ANSWER_MS, throwOnRequestTimeout: true, socketTimeout: ANSWER_MS },
      // many stores don't know the newer checksums; the signature covers the body's SHA-256
      requestChecksumCalculation: 'WHEN_REQUIRED',
      responseChecksumValidation: 'WHEN_REQUIRED',
    });
  }

  async put(key: string, content: Readable): Promise<void> {
    const upload = new Upload({
      client: this.client,
      queueSize: PARTS_AT_ONCE,
      params: { Bucket: this.bucket, Key: checkedKey(key), Body: content, IfNoneMatch: '*' },
    });
    try {
      await upload.done();
    } catch (error) {
      if (isTaken(error)) {
        // the key is ours alone: when an answer was lost and the same was sent again, the first one is what stands there
        if (attemptsOf(error) > 1) return;
        throw Object.assign(new Error('Something stands under this key already.'), { code: 'EEXIST' });
      }
      await this.remove(key).catch(() => undefined);
      // a sender who breaks off is not the store's trouble
      throw isOf(content, error) ? error : new StorageTrouble(error);
    } finally {
      content.destroy();
    }
  }

  async get(key: string): Promise<Readable> {
    const wanted = new GetObjectCommand({ Bucket: this.bucket, Key: checkedKey(key) });
    try {
      const { Body } = await this.client.send(wanted);
      return Body as Readable;
    } catch (error) {
      throw error instanceof NoSuchKey ? Object.assign(new Error('Nothing stands under this key.'), { code: 'ENOENT' }) : new StorageTrouble(error);
    }
  }

  async remove(key: string): Promise<void> {
    await this.client.send(new DeleteObjectCommand({ Bucket: this.bucket, Key: checkedKey(key) })).catch((error: unknown) => {
      throw new StorageTrouble(error);
    });
  }
}

/** Whether an error came out of what was read, not from the store. */
const isOf = (content: Readable, error: unknown): boolean => error === content.errored || (error as { code?: string }).code === 'ERR_STREAM_PREMATURE_CLOSE';
const isTaken = (error: unknown): boolean => (error as { name?: string }).name === 'PreconditionFailed';
const attemptsOf = (error: unknown): number => (error as { $metadata?: { attempts?: number } }).$metadata?.attempts ?? 1;
