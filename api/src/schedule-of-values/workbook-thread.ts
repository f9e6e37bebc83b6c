import ExcelJS from 'exceljs';
import { parentPort, workerData } from 'node:worker_threads';
import type { Cell, GridRow } from '@tallypole/shared/schedule-of-values';
import { CAPS } from './caps.ts';

export interface SheetGrid {
  name: string;
  rows: GridRow[];
  /** True where the sheet goes on beyond the caps. */
  cut: 'rows' | 'columns' | null;
}

// In a thread of its own with a bounded heap and time, since a workbook can ask for far more than its size lets expect.
const workbook = new ExcelJS.Workbook();
await workbook.xlsx.load(workerData as ArrayBuffer);
parentPort?.postMessage(workbook.worksheets.slice(0, CAPS.sheets + 1).map(readSheet));

function readSheet(sheet: ExcelJS.Worksheet): SheetGrid {
  const rows: GridRow[] = [];
  let cut: SheetGrid['cut'] = null;
  sheet.eachRow((row, number) => {
    if (rows.length >= CAPS.rows) cut ??= 'rows';
    if (cut) return;
    const cells: Cell[] = [];
    row.eachCell((cell, column) => {
      if (column <= CAPS.columns) cells[column - 1] = cellOf(cell);
      else if (cell.value !== null) cut ??= 'columns';
    });
    rows.push({ row: number, cells: Array.from(cells, (cell) => cell ?? ''), ...(row.hidden ? { hidden: true } : {}) });
  });
  return { name: sheet.name, rows, cut };
}

/** The text that a person sees, from a value or a formula's last result; a merged cell reads as its first one only. */
function cellOf(cell: ExcelJS.Cell): Cell {
  if (cell.isMerged && cell.master !== cell) return '';
  const { value } = cell;
  const seen = isFormula(value) ? (value.result ?? { error: '#FORMULA!' }) : value;
  return textOf(seen as ExcelJS.CellValue);
}

function textOf(value: ExcelJS.CellValue): Cell {
  if (value === null || value === undefined) return '';
  if (typeof value === 'number') return plainNumber(value);
  if (typeof value === 'string') return value.slice(0, CAPS.cellText);
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (value instanceof Date) return value.toISOString().slice(0, 10);
  if ('error' in value) return { error: value.error };
  if ('richText' in value) return value.richText.map(({ text }) => text).join('').slice(0, CAPS.cellText);
  if ('text' in value) return textOf(value.text);
  return '';
}

/** 15 digits are what a spreadsheet program holds: 0.1 + 0.2 reads 0.3. Never in powers of ten. */
function plainNumber(value: number): string {
  const rounded = Number(value.toPrecision(15));
  return Math.abs(rounded) < 1e15 && Math.abs(rounded) >= 1e-6 ? String(rounded) : rounded === 0 ? '0' : value.toFixed(6).replace(/\.?0+$/, '');
}

function isFormula(value: ExcelJS.CellValue): value is ExcelJS.CellFormulaValue | ExcelJS.CellSharedFormulaValue {
  return typeof value === 'object' && value !== null && ('formula' in value || 'sharedFormula' in value);
}
