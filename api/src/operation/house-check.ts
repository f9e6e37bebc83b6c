import type { FileStorage } from '../files/file-storage.ts';
import { sumOfStream, type Sum } from './backup-folder.ts';
import { withClient, type Owners } from './command.ts';
import { findings, forgottenMails, type Finding } from './invariants.repository.ts';
import { storedRows, type StoredRow } from './stored.repository.ts';

/** Looks at every invariant and every stored byte, says what it found, and gives back whether all is well. */
export async function checkHouse(owners: Owners, storage: FileStorage): Promise<boolean> {
  const found = await withClient(owners.app, (client) =>
    withClient(owners.queue, async (queue) => [...(await findings(client)), await forgottenMails(client, queue), await filesOf(await storedRows(client), storage)]),
  );
  for (const { name, looked, broken } of found) {
    console.log(`${broken.length === 0 ? 'ok    ' : 'BROKEN'}  ${name} (${looked})`);
    for (const what of broken) console.log(`        ${what}`);
  }
  return found.every(({ broken }) => broken.length === 0);
}

async function filesOf(rows: readonly StoredRow[], storage: FileStorage): Promise<Finding> {
  const broken: string[] = [];
  for (const row of rows) {
    const wrong = await troubleWith(row, storage);
    if (wrong) broken.push(`${row.key}: ${wrong}`);
  }
  return { name: 'every stored file is there with its SHA-256', looked: rows.length, broken };
}

async function troubleWith(row: StoredRow, storage: FileStorage): Promise<string | undefined> {
  try {
    return differs(row, await sumOfStream(await storage.get(row.key)));
  } catch (error) {
    return (error as { code?: string }).code === 'ENOENT' ? 'missing' : `cannot be read (${error instanceof Error ? error.message : String(error)})`;
  }
}

/** How what is stored differs from what the database says of it. */
export function differs({ sha256, bytes }: StoredRow, found: Sum): string | undefined {
  if (sha256 !== null && found.sha256 !== sha256) return `its SHA-256 is ${found.sha256}, not ${sha256}`;
  return found.bytes === bytes ? undefined : `${found.bytes} bytes, not ${bytes}`;
}
