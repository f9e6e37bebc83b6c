/** What one cell of a sheet reads: its text as a person sees it without thousands separators or currency, or the error it shows. */
export type Cell = string | { error: string };

/** One row with its number as the spreadsheet program counts it, from 1. Cells from column A on; missing ones are blank. */
export interface GridRow {
  row: number;
  cells: readonly Cell[];
  hidden?: boolean;
}

/** The text of a cell with its spaces tidied; an error cell reads as its error. */
export const cellText = (cell: Cell | undefined): string => {
  const text = cell === undefined ? '' : typeof cell === 'string' ? cell : cell.error;
  return text.replace(/[\s\u00a0]+/gu, ' ').trim();
};

/** 0 is A, 25 is Z, 26 is AA. */
export function columnLetter(index: number): string {
  const letter = String.fromCharCode(65 + (index % 26));
  return index < 26 ? letter : columnLetter(Math.floor(index / 26) - 1) + letter;
}

export const isBlankRow = (row: GridRow): boolean => row.cells.every((cell) => cellText(cell) === '');
