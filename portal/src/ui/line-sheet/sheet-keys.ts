import type { ClipboardEvent, KeyboardEvent } from 'react';
import { cellsFromClipboard } from './clipboard.ts';
import { nextEditable, write, type Sheet } from './edits.ts';
import { move } from './move.ts';
import type { CellPlace } from './types.ts';

/** Enter keeps and goes down, Tab keeps and opens the next cell, Escape gives up; all else is typing. */
export function editorKey<Row>(event: KeyboardEvent, { active, sheet }: { active: CellPlace; sheet: Sheet<Row> }, { go, open, close }: Acts & { close: (keep: boolean) => void }): void {
  if (event.key !== 'Escape' && event.key !== 'Enter' && event.key !== 'Tab') return;
  const size = { rows: sheet.rows.length, columns: sheet.columns.length };
  const next = event.key === 'Tab' ? nextEditable(sheet, active, event.shiftKey ? -1 : 1) : null;
  close(event.key !== 'Escape');
  // at the last cell Tab leaves the sheet
  if (event.key === 'Tab' && !next) return;
  event.preventDefault();
  event.stopPropagation();
  if (next) open(next);
  else go(event.key === 'Enter' ? (move(active, event.shiftKey ? 'ArrowUp' : 'ArrowDown', false, size) ?? active) : active);
}

interface Acts {
  go: (place: CellPlace) => void;
  open: (place: CellPlace, text?: string) => void;
}

/** What keys and the clipboard do at a cell that is not being edited. */
export function sheetKeys<Row>(sheet: Sheet<Row>, active: CellPlace, { go, open }: Acts) {
  return {
    onKeyDown: (event: KeyboardEvent) => {
      const next = move(active, event.key, event.ctrlKey || event.metaKey, { rows: sheet.rows.length, columns: sheet.columns.length });
      const types = event.key.length === 1 && event.key !== ' ' && !event.ctrlKey && !event.metaKey && !event.altKey;
      if (next) go(next);
      else if (event.key === 'Enter' || event.key === 'F2') open(active);
      else if (event.key === 'Delete' || event.key === 'Backspace') write(sheet, [{ ...active, text: '' }]);
      else if (types) open(active, event.key);
      else return;
      event.preventDefault();
    },
    onPaste: (event: ClipboardEvent) => {
      event.preventDefault();
      const cells = cellsFromClipboard(event.clipboardData.getData('text/plain'));
      write(sheet, cells.flatMap((texts, down) => texts.map((text, right) => ({ row: active.row + down, column: active.column + right, text: text.trim() }))));
    },
    onCopy: (event: ClipboardEvent) => {
      const [row, column] = [sheet.rows[active.row], sheet.columns[active.column]];
      if (row === undefined || !column) return;
      event.preventDefault();
      event.clipboardData.setData('text/plain', column.text(row));
    },
  };
}
