import { parse } from 'csv-parse';
import { Readable } from 'node:stream';
import type { GridRow } from '@tallypole/shared/schedule-of-values';
import { CAPS, tooMuch } from './caps.ts';
import { Problem } from '../common/problem.ts';

const DELIMITERS = [',', ';', '\t'] as const;

/** Reads delimited text: UTF-8 or UTF-16 with its mark, or Windows-1252; the delimiter is found out. Stops at the caps. */
export async function readCsv(content: Buffer): Promise<GridRow[]> {
  const text = decode(content);
  const parser = Readable.from([text]).pipe(
    parse({ bom: true, delimiter: delimiterOf(text), relax_column_count: true, relax_quotes: true, skip_empty_lines: false, max_record_size: 100_000 }),
  );
  const rows: GridRow[] = [];
  try {
    for await (const record of parser as AsyncIterable<string[]>) {
      if (rows.length === CAPS.rows) throw tooMuch('rows');
      if (record.length > CAPS.columns) throw tooMuch('columns');
      rows.push({ row: rows.length + 1, cells: record.map((cell) => cell.slice(0, CAPS.cellText)) });
    }
  } catch (error) {
    if (error instanceof Problem) throw error;
    const at = (error as { records?: number }).records ?? rows.length;
    throw new Problem('unreadable_file', { detail: `The file could not be read after row ${at}. Look for a quote that is not closed.` });
  }
  return rows;
}

function decode(content: Buffer): string {
  const [first, second] = content;
  if (first === 0xff && second === 0xfe) return new TextDecoder('utf-16le').decode(content);
  if (first === 0xfe && second === 0xff) return new TextDecoder('utf-16be').decode(content);
  if (content.includes(0)) throw new Problem('wrong_file_kind', { detail: 'Save the schedule as XLSX or CSV and choose that file.' });
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(content);
  } catch {
    return new TextDecoder('windows-1252').decode(content);
  }
}

/** The delimiter that stands most often outside of quotes in the beginning of the text. */
function delimiterOf(text: string): string {
  const outside = text.slice(0, 20_000).replace(/"[^"]*"/g, '');
  const count = (delimiter: string) => outside.split(delimiter).length;
  return [...DELIMITERS].sort((a, b) => count(b) - count(a))[0] ?? ',';
}
