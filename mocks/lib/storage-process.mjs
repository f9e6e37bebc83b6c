// The storage stand-in as a process. Sends 'ready' to its parent.
import { mkdirSync } from 'node:fs';
import { start } from '../storage/server.mjs';

const { STORAGE_PORT, STORAGE_DATA, S3_BUCKET, S3_ACCESS_KEY_ID, S3_SECRET_ACCESS_KEY } = process.env;
if (!STORAGE_PORT || !STORAGE_DATA || !S3_BUCKET || !S3_ACCESS_KEY_ID || !S3_SECRET_ACCESS_KEY) {
  throw new Error('STORAGE_PORT, STORAGE_DATA, S3_BUCKET, S3_ACCESS_KEY_ID and S3_SECRET_ACCESS_KEY are needed');
}
mkdirSync(STORAGE_DATA, { recursive: true });
await start({ port: Number(STORAGE_PORT), dataDir: STORAGE_DATA, bucket: S3_BUCKET, accessKeyId: S3_ACCESS_KEY_ID, secretAccessKey: S3_SECRET_ACCESS_KEY });
process.send?.('ready');
