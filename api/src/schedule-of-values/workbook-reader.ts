import path from 'node:path';
import { Worker } from 'node:worker_threads';
import { Problem } from '../common/problem.ts';
import { CAPS, tooMuch } from './caps.ts';
import type { SheetGrid } from './workbook-thread.ts';
import { unpacksWithin } from './zip-bounds.ts';

// beside this module, with its ending: .js when built, .ts under a runner that reads TypeScript
const thread = new URL(`./workbook-thread${path.extname(import.meta.filename)}`, import.meta.url);

/** Reads the sheets of an XLSX workbook. Neither its size unpacked nor what its content asks for can take down the server. */
export async function readWorkbook(content: Buffer): Promise<SheetGrid[]> {
  if (!unpacksWithin(content, CAPS.unzippedBytes)) throw tooMuch('unzipped');
  const sheets = await inThread(content);
  if (sheets.length > CAPS.sheets) throw tooMuch('sheets');
  return sheets;
}

async function inThread(content: Buffer): Promise<SheetGrid[]> {
  const worker = new Worker(thread, { workerData: new Uint8Array(content), resourceLimits: { maxOldGenerationSizeMb: CAPS.heapMegabytes, maxYoungGenerationSizeMb: 32 }, execArgv: [], stdout: true, stderr: true });
  let timer: NodeJS.Timeout | undefined;
  try {
    return await new Promise<SheetGrid[]>((done, fail) => {
      timer = setTimeout(() => fail(tooMuch('effort')), CAPS.milliseconds);
      worker.once('message', done);
      worker.once('error', (error: NodeJS.ErrnoException) =>
        fail(error.code === 'ERR_WORKER_OUT_OF_MEMORY' ? tooMuch('effort') : new Problem('unreadable_file', { detail: 'The workbook could not be read. Save it again as XLSX, or as CSV.' })));
      worker.once('exit', () => fail(tooMuch('effort')));
    });
  } finally {
    clearTimeout(timer);
    await worker.terminate();
  }
}
