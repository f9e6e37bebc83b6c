import { useCallback, type ReactNode } from 'react';
import { sheetKeys } from './sheet-keys.ts';
import { SheetRow } from './sheet-row.tsx';
import { useSheet } from './use-sheet.ts';
import type { CellEdit, SheetColumn } from './types.ts';
import classes from './line-sheet.module.css';

export interface LineSheetProps<Row> {
  /** What the sheet holds, for who doesn't see it. */
  label: string;
  rows: readonly Row[];
  rowKey: (row: Row, index: number) => string;
  columns: readonly SheetColumn<Row>[];
  /** Takes edits, one for a cell that was typed into, many for a paste. Without it the sheet is for reading. */
  onEdit?: (edits: CellEdit[]) => void;
  /** Whether a paste may go on beyond the last row; its edits then name rows that don't exist yet. */
  canGrow?: boolean;
  /** A heading above each row whose group differs from the row before. */
  group?: (row: Row) => string;
  /** What stands in the last row under a column, by its key: totals. */
  totals?: Readonly<Record<string, ReactNode>>;
}

/**
 * The sheet that schedule, pricing and draw lines share: a table that works by keyboard like a spreadsheet and is one stop for Tab.
 * Arrows, Home, End, PageUp and PageDown move (with Ctrl to the edge); Enter, F2, a double click or typing edits; Enter keeps and goes
 * down, Tab keeps and goes on to the next cell, Escape gives up; Delete clears; copy and paste as in spreadsheet programs.
 * Rows are values: replace an edited row with a new one, keep the others as they are, and keep `columns` the same between renders
 * (outside of the component or in useMemo), so that 500 lines stay quick.
 */
export function LineSheet<Row>({ label, rows, rowKey, columns, onEdit, canGrow = false, group, totals }: LineSheetProps<Row>) {
  const sheet = { rows, columns, onEdit, canGrow };
  const { table, active, draft, setDraft, go, open, close, pick, onEditorKey } = useSheet(sheet);
  const keys = draft === null ? sheetKeys(sheet, active, { go, open }) : {};
  const onOpen = useCallback((row: number, column: number) => open({ row, column }), [open]);
  const onLeave = useCallback(() => close(true), [close]);
  return (
    <div className={classes['scroll']}>
      <table ref={table} role="grid" aria-label={label} aria-rowcount={rows.length + 1} aria-colcount={columns.length} aria-readonly={onEdit ? undefined : true}
        className={classes['sheet']} {...keys}>
        <colgroup>
          {columns.map(({ key, width }) => <col key={key} style={width ? { width } : undefined} />)}
        </colgroup>
        <thead>
          <tr aria-rowindex={1}>
            {columns.map(({ key, title, align }, at) => <th key={key} scope="col" aria-colindex={at + 1} data-align={align}>{title}</th>)}
          </tr>
        </thead>
        {grouped(rows, group).map(({ name, from, rows: part }) => (
          <tbody key={from}>
            {name !== null && (
              <tr className={classes['group']}>
                <th scope="rowgroup" colSpan={columns.length}>{name}</th>
              </tr>
            )}
            {part.map((row, i) => (
              <SheetRow key={rowKey(row, from + i)} row={row} index={from + i} columns={columns} active={active.row === from + i ? active.column : null}
                draft={active.row === from + i ? draft : null} onPick={pick} onOpen={onOpen} onDraft={setDraft} onEditorKey={onEditorKey} onLeave={onLeave} />
            ))}
          </tbody>
        ))}
        {totals && (
          <tfoot>
            <tr>{columns.map(({ key, align }) => <td key={key} data-align={align}>{totals[key]}</td>)}</tr>
          </tfoot>
        )}
      </table>
    </div>
  );
}

function grouped<Row>(rows: readonly Row[], group: ((row: Row) => string) | undefined): { name: string | null; from: number; rows: Row[] }[] {
  const parts: { name: string | null; from: number; rows: Row[] }[] = [];
  rows.forEach((row, index) => {
    const name = group ? group(row) : null;
    const last = parts.at(-1);
    if (last && last.name === name) last.rows.push(row);
    else parts.push({ name, from: index, rows: [row] });
  });
  return parts;
}
