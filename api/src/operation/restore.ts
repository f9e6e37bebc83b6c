// Fills a database and a store of files from a backup, then checks what came out.
import { createReadStream } from 'node:fs';
import path from 'node:path';
import { readStorageSettings } from '../common/configuration.ts';
import { unknownMigrations } from '../database/migrator.ts';
import type { FileStorage } from '../files/file-storage.ts';
import { storageOf } from '../files/storage-of.ts';
import { BackupFolder, sumOfStream, type Listed } from './backup-folder.ts';
import { Refusal, command, options, ownersOf, withClient, type Owners } from './command.ts';
import { checkHouse } from './house-check.ts';
import { fill } from './pg-tools.ts';
import { analyze, emptyApp, emptyQueue, firmsIn, serversIn } from './stored.repository.ts';

await command(async () => {
  const { from, over } = options({ from: { type: 'string' }, over: { type: 'boolean' } });
  if (!from) throw new Refusal('Say where the backup is: npm run restore -- --from <folder>');
  const owners = ownersOf(process.env);
  const storage = await storageOf(readStorageSettings(process.env));
  const backup = new BackupFolder(path.resolve(from));
  const { manifest, files } = await backup.verified();
  const unknown = unknownMigrations(manifest.migrations);
  if (unknown.length > 0) throw new Refusal(`This backup is of a newer version: it has ${unknown.join(', ')}. Restore it with that version.`);
  await refuseFilled(owners, over ?? false);
  // files first: as long as the database doesn't speak of them they are nothing but unused
  for (const file of files) await bringBack(storage, backup, file);
  await withClient(owners.queue, emptyQueue);
  await withClient(owners.app, emptyApp);
  await fill(owners.queue, backup.queue);
  await fill(owners.app, backup.app);
  await withClient(owners.app, analyze);
  console.log(`Restored as of ${manifest.madeAt}, with ${manifest.stored} files.`);
  return await checkHouse(owners, storage);
});

async function refuseFilled(owners: Owners, over: boolean): Promise<void> {
  const { firms, servers } = await withClient(owners.app, async (client) => ({ firms: await firmsIn(client), servers: await serversIn(client) }));
  if (servers > 0) throw new Refusal(`${servers} connections of running servers use this database. Stop them first.`);
  if (firms && !over) throw new Refusal(`This database is not empty: it has ${firms} ${firms === 1 ? 'firm' : 'firms'}. To replace everything in it, add --over.`);
}

async function bringBack(storage: FileStorage, backup: BackupFolder, { key, sha256 }: Listed): Promise<void> {
  try {
    await storage.put(key, createReadStream(backup.fileOf(key)));
  } catch (error) {
    if ((error as { code?: string }).code !== 'EEXIST') throw error;
    if ((await sumOfStream(await storage.get(key))).sha256 !== sha256) throw new Refusal(`Another file stands under ${key} in the store. Nothing was restored; remove it, or restore into an empty store.`);
  }
}
