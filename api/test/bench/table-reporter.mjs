import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';

/** Prints what the measurements noted as one table. */
export default class TableReporter {
  folder = mkdtempSync(path.join(tmpdir(), 'tally-bench-'));

  constructor() {
    process.env.BENCH_ROWS = path.join(this.folder, 'rows.jsonl');
    writeFileSync(process.env.BENCH_ROWS, '');
  }

  onRunComplete() {
    const rows = readFileSync(process.env.BENCH_ROWS, 'utf8').split('\n').filter(Boolean).map((line) => JSON.parse(line));
    console.log(`\n| what | against | ratio | target | seen |\n|---|---|---|---|---|`);
    for (const { what, against, ratio, target, met, seen } of rows) console.log(`| ${what} | ${against} | ${ratio.toFixed(2)} | ${target}${met ? '' : ' (missed)'} | ${seen} |`);
    rmSync(this.folder, { recursive: true });
  }
}
