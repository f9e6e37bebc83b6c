// Checks the invariants of the database and every stored file, and says what it found.
import { readStorageSettings } from '../common/configuration.ts';
import { storageOf } from '../files/storage-of.ts';
import { command, options, ownersOf } from './command.ts';
import { checkHouse } from './house-check.ts';

await command(async () => {
  options({});
  return await checkHouse(ownersOf(process.env), await storageOf(readStorageSettings(process.env)));
});
