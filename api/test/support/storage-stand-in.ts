import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { start } from '../../../mocks/storage/server.mjs';
import { freePort } from './house.ts';

export interface Kept {
  objects: { key: string; bytes: number; etag: string }[];
  uploads: string[];
  faults: object[];
}

const BUCKET = { bucket: 'tally-test', accessKeyId: 'demo-access-key', secretAccessKey: 'demo-secret-key-of-tests' };

/** The storage stand-in in this process, with its control surface. */
export class StorageStandIn {
  private running: { close: () => Promise<unknown> } | undefined;
  private readonly dataDir = mkdtempSync(path.join(tmpdir(), 'tally-storage-'));
  readonly url: string;

  private constructor(private readonly port: number) {
    this.url = `http://127.0.0.1:${port}`;
  }

  static async open(): Promise<StorageStandIn> {
    const standIn = new StorageStandIn(await freePort());
    await standIn.start();
    return standIn;
  }

  /** What a server needs to keep its files here. */
  get env(): Record<string, string> {
    return { STORAGE: 's3', S3_ENDPOINT: this.url, S3_BUCKET: BUCKET.bucket, S3_ACCESS_KEY_ID: BUCKET.accessKeyId, S3_SECRET_ACCESS_KEY: BUCKET.secretAccessKey };
  }

  async start(): Promise<void> {
    this.running = await start({ port: this.port, dataDir: this.dataDir, ...BUCKET });
  }

  /** The service is down; what it keeps stays. */
  async stop(): Promise<void> {
    await this.running?.close();
    this.running = undefined;
  }

  async close(): Promise<void> {
    await this.stop();
    rmSync(this.dataDir, { recursive: true, force: true });
  }

  async fault(mode: string, more: { method?: string; times?: number } = {}): Promise<void> {
    await this.control('/faults', { method: 'POST', body: JSON.stringify({ mode, ...more }) });
  }

  async faultsOver(): Promise<void> {
    await this.control('/faults', { method: 'DELETE' });
  }

  async kept(): Promise<Kept> {
    return (await this.control('', {})) as Kept;
  }

  private async control(where: string, init: RequestInit): Promise<unknown> {
    const answer = await fetch(`${this.url}/_control${where}`, { ...init, headers: { connection: 'close' } });
    return await answer.json();
  }
}
