import { createHash } from 'node:crypto';
import { createReadStream, createWriteStream, existsSync } from 'node:fs';
import { mkdir, readFile, readdir, rename, writeFile } from 'node:fs/promises';
import path from 'node:path';
import type { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { z } from 'zod';
import { Refusal } from './command.ts';

const Sum = z.object({ bytes: z.int().min(0), sha256: z.string().regex(/^[0-9a-f]{64}$/) });
export type Sum = z.infer<typeof Sum>;
const Manifest = z.object({ format: z.literal(1), madeAt: z.iso.datetime(), migrations: z.array(z.string()), app: Sum, queue: Sum, files: Sum, stored: z.int() });
export type Manifest = z.infer<typeof Manifest>;
const Listed = z.object({ key: z.string(), ...Sum.shape });
export type Listed = z.infer<typeof Listed>;

/** A backup: two dumps, the stored files under their keys, a list of these, and last of all a manifest with the sums of everything. */
export class BackupFolder {
  readonly app: string;
  readonly queue: string;
  private readonly list: string;
  private readonly manifest: string;

  constructor(private readonly folder: string) {
    this.app = path.join(folder, 'app.dump');
    this.queue = path.join(folder, 'queue.dump');
    this.list = path.join(folder, 'files.jsonl');
    this.manifest = path.join(folder, 'manifest.json');
  }

  /** Makes the folder; only its maker may look into it. One with something in it is not touched. */
  async make(): Promise<void> {
    await mkdir(this.folder, { recursive: true, mode: 0o700 });
    if ((await readdir(this.folder)).length > 0) throw new Refusal(`${this.folder} is not empty. Name a new folder.`);
  }

  fileOf(key: string): string {
    return path.join(this.folder, 'files', key);
  }

  async keep(key: string, content: Readable): Promise<Sum> {
    const file = this.fileOf(key);
    await mkdir(path.dirname(file), { recursive: true, mode: 0o700 });
    const meter = new Meter();
    await pipeline(content, meter.pass, createWriteStream(file, { flags: 'wx', mode: 0o600, flush: true }));
    return meter.sum();
  }

  /** A folder without a manifest is no backup: it is written when everything else is there. */
  async finish(files: readonly Listed[], more: Pick<Manifest, 'madeAt' | 'migrations'>): Promise<Manifest> {
    await writeFile(this.list, files.map((file) => `${JSON.stringify(file)}\n`).join(''), { mode: 0o600, flush: true });
    const manifest: Manifest = { format: 1, ...more, app: await sumOf(this.app), queue: await sumOf(this.queue), files: await sumOf(this.list), stored: files.length };
    await writeFile(`${this.manifest}.new`, `${JSON.stringify(manifest, null, 2)}\n`, { mode: 0o600, flush: true });
    await rename(`${this.manifest}.new`, this.manifest);
    return manifest;
  }

  /** Reads every byte and compares it with what was written down when it was made. */
  async verified(): Promise<{ manifest: Manifest; files: Listed[] }> {
    if (!existsSync(this.manifest)) throw new Refusal(`${this.folder} holds no whole backup: it has no manifest.json.`);
    const { data: manifest } = Manifest.safeParse(parsed(await readFile(this.manifest, 'utf8')));
    if (!manifest) throw new Refusal(`${this.manifest} can't be read as a manifest of this program.`);
    await this.compare(this.app, manifest.app);
    await this.compare(this.queue, manifest.queue);
    await this.compare(this.list, manifest.files);
    const lines = (await readFile(this.list, 'utf8')).split('\n').filter((line) => line !== '');
    const files = lines.map((line) => Listed.parse(JSON.parse(line)));
    for (const file of files) await this.compare(this.fileOf(file.key), file);
    return { manifest, files };
  }

  private async compare(file: string, { bytes, sha256 }: Sum): Promise<void> {
    const found = existsSync(file) ? await sumOf(file) : undefined;
    if (!found) throw new Refusal(`${path.relative(this.folder, file)} is missing from the backup.`);
    if (found.bytes !== bytes || found.sha256 !== sha256) throw new Refusal(`${path.relative(this.folder, file)} is not what was backed up: its SHA-256 is ${found.sha256}, not ${sha256}.`);
  }
}

/** Counts and hashes what passes. */
class Meter {
  private bytes = 0;
  private readonly hash = createHash('sha256');
  readonly pass = async function* (this: Meter, source: AsyncIterable<Buffer>) {
    for await (const chunk of source) {
      this.bytes += chunk.length;
      this.hash.update(chunk);
      yield chunk;
    }
  }.bind(this);

  sum(): Sum {
    return { bytes: this.bytes, sha256: this.hash.digest('hex') };
  }
}

const sumOf = (file: string): Promise<Sum> => sumOfStream(createReadStream(file));

export async function sumOfStream(content: Readable): Promise<Sum> {
  const meter = new Meter();
  await pipeline(content, meter.pass, async (source: AsyncIterable<Buffer>) => {
    for await (const _chunk of source);
  });
  return meter.sum();
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
