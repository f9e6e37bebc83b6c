import { useCallback, useEffect, useRef, useState, type KeyboardEvent } from 'react';
import { editable, type Sheet } from './edits.ts';
import { editorKey } from './sheet-keys.ts';
import type { CellPlace } from './types.ts';

/** The state of a sheet: which cell the keyboard is at and what is typed into it. */
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

  /** Begins to edit a cell, with its text or with the first letter that was typed over it. */
  const open = useCallback((place: CellPlace, text?: string) => {
    const found = editable(now.current.sheet, place);
    if (!found) return;
    setActive(place);
    setDraft(text === undefined || found.column.choices ? found.column.text(found.row) : text);
  }, []);

  /** Ends the editing; keeps what was typed unless it is given up. */
  const close = useCallback((keep: boolean) => {
    const { sheet: latest, active: place, draft: typed } = now.current;
    const found = editable(latest, place);
    if (typed === null) return;
    now.current.draft = null;
    setDraft(null);
    if (keep && found && typed !== found.column.text(found.row)) latest.onEdit?.([{ row: place.row, column: found.column.key, text: typed }]);
  }, []);

  const pick = useCallback((row: number, column: number) => {
    const { draft: typed, active: place } = now.current;
    if (typed !== null && place.row === row && place.column === column) return;
    close(true);
    go({ row, column });
  }, [close, go]);

  const onEditorKey = useCallback((event: KeyboardEvent) => editorKey(event, now.current, { go, open, close }), [go, open, close]);
  return { table, active, draft, setDraft, go, open, close, pick, onEditorKey };
}
