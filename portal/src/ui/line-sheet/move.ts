import type { CellPlace } from './types.ts';

const PAGE = 15;

/** Where a key leads from a cell, or null where it isn't a key that moves. */
export function move(from: CellPlace, key: string, control: boolean, size: { rows: number; columns: number }): CellPlace | null {
  const { row, column } = from;
  const [lastRow, lastColumn] = [Math.max(0, size.rows - 1), Math.max(0, size.columns - 1)];
  const to = (nextRow: number, nextColumn: number): CellPlace => ({ row: Math.min(lastRow, Math.max(0, nextRow)), column: Math.min(lastColumn, Math.max(0, nextColumn)) });
  switch (key) {
    case 'ArrowUp':
      return to(control ? 0 : row - 1, column);
    case 'ArrowDown':
      return to(control ? lastRow : row + 1, column);
    case 'ArrowLeft':
      return to(row, control ? 0 : column - 1);
    case 'ArrowRight':
      return to(row, control ? lastColumn : column + 1);
    case 'Home':
      return to(control ? 0 : row, 0);
    case 'End':
      return to(control ? lastRow : row, lastColumn);
    case 'PageUp':
      return to(row - PAGE, column);
    case 'PageDown':
      return to(row + PAGE, column);
    default:
      return null;
  }
}
