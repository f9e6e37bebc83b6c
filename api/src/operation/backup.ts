// Writes everything into a new folder: the database as it is at one moment, and every file that it speaks of then.
import path from 'node:path';
import { readStorageSettings } from '../common/configuration.ts';
import { storageOf } from '../files/storage-of.ts';
import { BackupFolder, type Listed } from './backup-folder.ts';
import { Refusal, command, options, ownersOf, withClient } from './command.ts';
import { differs } from './house-check.ts';
import { dump } from './pg-tools.ts';
import { appliedMigrations, exportSnapshot, storedRows } from './stored.repository.ts';

await command(async () => {
  const { to } = options({ to: { type: 'string' } });
  if (!to) throw new Refusal('Say where the backup goes: npm run backup -- --to <folder>');
  const owners = ownersOf(process.env);
  const storage = await storageOf(readStorageSettings(process.env));
  const backup = new BackupFolder(path.resolve(to));
  // what pg_dump writes, too, is for its maker alone
  process.umask(0o077);
  await backup.make();
  const manifest = await withClient(owners.app, async (client) => {
    const madeAt = new Date().toISOString();
    const snapshot = await exportSnapshot(client);
    await dump('app', owners.app, backup.app, snapshot);
    await dump('queue', owners.queue, backup.queue, snapshot);
    // a file is stored before its row is committed and never changes: what the snapshot speaks of is there
    const files: Listed[] = [];
    for (const row of await storedRows(client)) {
      const sum = await backup.keep(row.key, await storage.get(row.key));
      const wrong = differs(row, sum);
      if (wrong) throw new Refusal(`The stored file ${row.key} is broken: ${wrong}. Nothing was backed up; npm run check says what else is wrong.`);
      files.push({ key: row.key, ...sum });
    }
    return await backup.finish(files, { madeAt, migrations: await appliedMigrations(client) });
  });
  console.log(`Backed up to ${path.resolve(to)}: the database as of ${manifest.madeAt} and ${manifest.stored} files.`);
  return true;
});
