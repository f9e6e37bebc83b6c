import { proposeMilestones, readGrid, type GridRow, type ScheduleReading } from '@tallypole/shared/schedule-of-values';
import type { SchedulePreview } from '@tallypole/shared/schemas/schedule-of-values';
import { Problem } from '../common/problem.ts';
import { tooMuch } from './caps.ts';
import { readCsv } from './csv-reader.ts';
import { readWorkbook } from './workbook-reader.ts';

export interface ScheduleFile {
  name: string;
  content: Buffer;
  /** The sheet that was asked for by name. */
  sheet?: string | undefined;
}

export interface ContractFacts {
  contractSumCents: number;
  startOn: string;
  completeBy: string;
}

interface Sheet {
  name: string | null;
  rows: GridRow[];
  cut: 'rows' | 'columns' | null;
}

/** Reads a schedule of values from CSV or XLSX and says what is wrong with it, cell by cell. Writes nothing. */
export async function readSchedule(file: ScheduleFile, contract: ContractFacts): Promise<SchedulePreview> {
  const sheets = await sheetsOf(file.content);
  const { sheet, reading } = choose(sheets, file.sheet, contract.contractSumCents);
  return {
    fileName: file.name,
    sheet: sheet.name,
    sheets: sheets.flatMap(({ name }) => (name === null ? [] : [name])),
    ...reading,
    startOn: contract.startOn,
    completeBy: contract.completeBy,
    milestones: proposeMilestones(reading.lines, contract.startOn, contract.completeBy),
  };
}

async function sheetsOf(content: Buffer): Promise<Sheet[]> {
  if (content.subarray(0, 4).equals(Buffer.from([0x50, 0x4b, 0x03, 0x04]))) return await readWorkbook(content);
  return [{ name: null, rows: await readCsv(content), cut: null }];
}

/** The sheet that was asked for, or the one that reads as the longest schedule. */
function choose(sheets: Sheet[], asked: string | undefined, contractSumCents: number): { sheet: Sheet; reading: ScheduleReading } {
  const wanted = asked === undefined ? sheets : sheets.filter(({ name }) => name === asked);
  if (wanted.length === 0) throw Problem.field('/sheet', 'The workbook has no sheet of this name.');
  const cut = wanted.find((sheet) => sheet.cut !== null && (wanted.length === 1 || readGrid(sheet.rows.slice(0, 100), contractSumCents)));
  if (cut?.cut) throw tooMuch(cut.cut);
  const found = wanted.flatMap((sheet) => {
    const reading = readGrid(sheet.rows, contractSumCents);
    return reading ? [{ sheet, reading }] : [];
  });
  const best = found.sort((a, b) => b.reading.lines.length - a.reading.lines.length)[0];
  if (!best) {
    throw new Problem('unreadable_file', { detail: 'No row names the columns. Name at least "Description" and "Scheduled value" above the lines.' });
  }
  if (best.reading.lines.length === 0) throw new Problem('unreadable_file', { detail: `There is no line below the header in row ${best.reading.headerRow}.` });
  return best;
}
