import type { ReactNode } from 'react';

/** One column of a sheet. `Row` is whatever the page keeps per line; it must be replaced, not changed in place, when it is edited. */
export interface SheetColumn<Row> {
  key: string;
  title: string;
  /** A CSS width; the others share what is left. */
  width?: string;
  align?: 'left' | 'right';
  /** The cell as text: what is edited, copied and pasted. */
  text: (row: Row) => string;
  /** How the cell reads while it isn't edited, where that differs from its text. */
  show?: (row: Row) => ReactNode;
  /** Whether the cell can be edited: never, always (true) or by row. */
  edit?: boolean | ((row: Row) => boolean);
  /** Where the cell is a choice. */
  choices?: readonly { value: string; label: string }[];
  /** What is wrong with the cell, in a sentence; null when nothing is. */
  problem?: (row: Row) => string | null;
  inputMode?: 'text' | 'decimal' | 'numeric';
}

/** One cell's new text. A paste is many edits in one call. `row` counts from 0 and may lie beyond the last row when rows can be added. */
export interface CellEdit {
  row: number;
  column: string;
  text: string;
}

export interface CellPlace {
  row: number;
  column: number;
}

export const canEdit = <Row,>(column: SheetColumn<Row>, row: Row): boolean => (typeof column.edit === 'function' ? column.edit(row) : (column.edit ?? false));
