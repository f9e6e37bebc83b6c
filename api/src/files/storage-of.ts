import type { StorageSettings } from '../common/configuration.ts';
import type { FileStorage } from './file-storage.ts';
import { LocalDiskStorage } from './local-disk-storage.ts';

/** The storage that the configuration names. The client for buckets is large: it is loaded only where there is one. */
export async function storageOf(settings: StorageSettings): Promise<FileStorage> {
  if (settings.STORAGE === 'disk') return new LocalDiskStorage(settings.FILES_DIR);
  const { S3Storage } = await import('./s3-storage.ts');
  return new S3Storage({
    endpoint: settings.S3_ENDPOINT,
    region: settings.S3_REGION,
    bucket: settings.S3_BUCKET,
    accessKeyId: settings.S3_ACCESS_KEY_ID,
    secretAccessKey: settings.S3_SECRET_ACCESS_KEY,
    pathStyle: settings.S3_PATH_STYLE,
  });
}
