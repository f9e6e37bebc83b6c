import { useCallback, useEffect, useRef, useState, type ClipboardEvent, type KeyboardEvent } from 'react';
import { cellsFromClipboard } from './clipboard.ts';
import { move } from './move.ts';
import { canEdit, type CellEdit, type CellPlace, type SheetColumn } from './types.ts';

interface Sheet<Row> {
  rows: readonly Row[];
  columns: readonly SheetColumn<Row>[];
  onEdit: ((edits: CellEdit[]) => void) | undefined;
  canGrow: boolean;
}

/** The state of a sheet: which cell the keyboard is at, what is typed into it, and what keys and the clipboard do. */
export function useSheet<Row>(sheet: Sheet<Row>) {
  const table = useRef<HTMLTableElement>(null);
  const [active, setActive] = useState<CellPlace>({ row: 0, column: 0 });
  const [draft, setDraft] = useState<string | null>(null);
  // handlers stay the same between renders, so that rows aren't drawn anew; they read the latest values here
  const now = useRef({ sheet, active, draft });
  useEffect(() => {
    now.current = { sheet, active, draft };
  });
  const wantsFocus = useRef(false);

  useEffect(() => {
    if (!wantsFocus.current || draft !== null) return;
    wantsFocus.current = false;
    table.current?.querySelector<HTMLElement>(`[data-cell="${active.row}:${active.column}"]`)?.focus();
  }, [active, draft]);

  const go = useCallback((place: CellPlace) => {
    wantsFocus.current = true;
    setActive(place);
  }, []);

  const open = useCallback((place: CellPlace, text?: string) => {
    const { rows, columns, onEdit } = now.current.sheet;
    const [row, column] = [rows[place.row], columns[place.column]];
    if (!onEdit || row === undefined || !column || !canEdit(column, row)) return;
    setActive(place);
    setDraft(text === undefined || column.choices ? column.text(row) : text);
  }, []);

  /** Ends the editing; keeps what was typed unless it is given up. */
  const close = useCallback((keep: boolean) => {
    const { sheet: { rows, columns, onEdit }, active: place, draft: typed } = now.current;
    const [row, column] = [rows[place.row], columns[place.column]];
    if (typed === null) return;
    now.current.draft = null;
    setDraft(null);
    if (keep && row !== undefined && column && typed !== column.text(row)) onEdit?.([{ row: place.row, column: column.key, text: typed }]);
  }, []);

  const onEditorKey = useCallback((event: KeyboardEvent) => {
    const { active: place, sheet: { rows, columns } } = now.current;
    const size = { rows: rows.length, columns: columns.length };
    if (event.key === 'Escape') {
      event.preventDefault();
      event.stopPropagation();
      close(false);
      go(place);
    } else if (event.key === 'Enter') {
      event.preventDefault();
      event.stopPropagation();
      close(true);
      go(move(place, event.shiftKey ? 'ArrowUp' : 'ArrowDown', false, size) ?? place);
    } else if (event.key === 'Tab') {
      const next = nextEditable(rows, columns, place, event.shiftKey ? -1 : 1);
      close(true);
      if (!next) return;
      event.preventDefault();
      event.stopPropagation();
      open(next);
    }
  }, [close, go, open]);

  const onKeyDown = (event: KeyboardEvent) => {
    if (now.current.draft !== null) return;
    const next = move(active, event.key, event.ctrlKey || event.metaKey, { rows: sheet.rows.length, columns: sheet.columns.length });
    if (next) {
      event.preventDefault();
      go(next);
    } else if (event.key === 'Enter' || event.key === 'F2') {
      event.preventDefault();
      open(active);
    } else if (event.key === 'Delete' || event.key === 'Backspace') {
      event.preventDefault();
      write(sheet, [{ ...active, text: '' }]);
    } else if (event.key.length === 1 && !event.ctrlKey && !event.metaKey && !event.altKey && event.key !== ' ') {
      event.preventDefault();
      open(active, event.key);
    }
  };

  const onPaste = (event: ClipboardEvent) => {
    if (now.current.draft !== null) return;
    event.preventDefault();
    const cells = cellsFromClipboard(event.clipboardData.getData('text/plain'));
    write(sheet, cells.flatMap((texts, down) => texts.map((text, right) => ({ row: active.row + down, column: active.column + right, text: text.trim() }))));
  };

  const onCopy = (event: ClipboardEvent) => {
    const [row, column] = [sheet.rows[active.row], sheet.columns[active.column]];
    if (now.current.draft !== null || row === undefined || !column) return;
    event.preventDefault();
    event.clipboardData.setData('text/plain', column.text(row));
  };

  const pick = useCallback((row: number, column: number) => {
    if (now.current.draft !== null && now.current.active.row === row && now.current.active.column === column) return;
    close(true);
    go({ row, column });
  }, [close, go]);
  const onOpen = useCallback((row: number, column: number) => open({ row, column }), [open]);
  const onLeave = useCallback(() => close(true), [close]);
  return { table, active, draft, setDraft, pick, onOpen, onEditorKey, onLeave, onKeyDown, onPaste, onCopy };
}

/** Hands out the edits of cells that can be edited; rows beyond the last only where the sheet grows. */
function write<Row>({ rows, columns, onEdit, canGrow }: Sheet<Row>, cells: { row: number; column: number; text: string }[]): void {
  const edits = cells.flatMap(({ row, column, text }) => {
    const [target, of] = [rows[row], columns[column]];
    if (!of || (target === undefined ? !canGrow || !of.edit : !canEdit(of, target))) return [];
    const choice = of.choices?.find(({ value, label }) => value === text || label.toLowerCase() === text.toLowerCase());
    return of.choices && !choice ? [] : [{ row, column: of.key, text: choice?.value ?? text }];
  });
  if (edits.length > 0) onEdit?.(edits);
}

function nextEditable<Row>(rows: readonly Row[], columns: readonly SheetColumn<Row>[], from: CellPlace, step: 1 | -1): CellPlace | null {
  const width = columns.length;
  for (let at = from.row * width + from.column + step; at >= 0 && at < rows.length * width; at += step) {
    const [row, column] = [rows[Math.floor(at / width)], columns[at % width]];
    if (row !== undefined && column && canEdit(column, row)) return { row: Math.floor(at / width), column: at % width };
  }
  return null;
}
