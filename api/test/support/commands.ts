import { spawn } from 'node:child_process';
import { text } from 'node:stream/consumers';
import path from 'node:path';
import type { House } from './house.ts';

const api = path.join(import.meta.dirname, '../..');

export interface Done {
  status: number | null;
  output: string;
  errors: string;
}

/** Runs one of the commands for operators against a house. */
export async function operate(house: House, name: 'backup' | 'restore' | 'check', args: string[] = [], env: Record<string, string> = {}): Promise<Done> {
  const child = spawn(process.execPath, [`dist/operation/${name}.js`, ...args], {
    cwd: api,
    env: { ...house.env, DATABASE_OWNER_URL: house.ownerUrl, PG_BIN: house.postgresBin, ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
    timeout: 60_000,
  });
  const ended = new Promise<number | null>((done) => child.once('close', done));
  const [output, errors] = await Promise.all([text(child.stdout), text(child.stderr)]);
  return { status: await ended, output, errors: errors.trim() };
}
