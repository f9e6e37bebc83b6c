import { canEdit, type CellEdit, type CellPlace, type SheetColumn } from './types.ts';

export interface Sheet<Row> {
  rows: readonly Row[];
  columns: readonly SheetColumn<Row>[];
  onEdit: ((edits: CellEdit[]) => void) | undefined;
  canGrow: boolean;
}

/** The cell's row and column, where it exists and may be edited. */
export function editable<Row>({ rows, columns, onEdit }: Sheet<Row>, place: CellPlace): { row: Row; column: SheetColumn<Row> } | null {
  const [row, column] = [rows[place.row], columns[place.column]];
  return onEdit && row !== undefined && column && canEdit(column, row) ? { row, column } : null;
}

/** Hands out the edits of cells that can be edited; rows beyond the last only where the sheet grows. */
export function write<Row>({ rows, columns, onEdit, canGrow }: Sheet<Row>, cells: (CellPlace & { text: string })[]): void {
  const edits = cells.flatMap(({ row, column, text }) => {
    const [target, of] = [rows[row], columns[column]];
    if (!of || (target === undefined ? !canGrow || !of.edit : !canEdit(of, target))) return [];
    const choice = of.choices?.find(({ value, label }) => value === text || label.toLowerCase() === text.toLowerCase());
    return of.choices && !choice ? [] : [{ row, column: of.key, text: choice?.value ?? text }];
  });
  if (edits.length > 0) onEdit?.(edits);
}

/** The next cell that can be edited, in reading order or against it. */
export function nextEditable<Row>(sheet: Sheet<Row>, from: CellPlace, step: 1 | -1): CellPlace | null {
  const width = sheet.columns.length;
  for (let at = from.row * width + from.column + step; at >= 0 && at < sheet.rows.length * width; at += step) {
    const place = { row: Math.floor(at / width), column: at % width };
    if (editable(sheet, place)) return place;
  }
  return null;
}
