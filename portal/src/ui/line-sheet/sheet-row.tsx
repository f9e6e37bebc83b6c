import { memo, type KeyboardEvent } from 'react';
import { CellEditor } from './cell-editor.tsx';
import { canEdit, type SheetColumn } from './types.ts';
import classes from './line-sheet.module.css';

export interface SheetRowProps<Row> {
  row: Row;
  index: number;
  columns: readonly SheetColumn<Row>[];
  /** The column of the cell that the keyboard is at, if it is in this row. */
  active: number | null;
  /** The text being typed into that cell. */
  draft: string | null;
  onPick: (row: number, column: number) => void;
  onOpen: (row: number, column: number) => void;
  onDraft: (text: string) => void;
  onEditorKey: (event: KeyboardEvent) => void;
  onLeave: () => void;
}

function Row<T>({ row, index, columns, active, draft, onPick, onOpen, onDraft, onEditorKey, onLeave }: SheetRowProps<T>) {
  return (
    <tr aria-rowindex={index + 2}>
      {columns.map((column, at) => {
        const problem = column.problem?.(row) ?? null;
        const editing = active === at && draft !== null;
        const problemId = problem ? `problem-${index}-${at}` : undefined;
        return (
          <td
            key={column.key}
            role="gridcell"
            aria-colindex={at + 1}
            data-cell={`${index}:${at}`}
            data-align={column.align}
            data-editing={editing || undefined}
            aria-invalid={problem ? true : undefined}
            aria-describedby={problemId}
            aria-readonly={canEdit(column, row) ? undefined : true}
            title={problem ?? undefined}
            tabIndex={active === at && !editing ? 0 : -1}
            className={classes['cell']}
            onMouseDown={() => onPick(index, at)}
            onDoubleClick={() => onOpen(index, at)}
          >
            {editing ? (
              <CellEditor label={`${column.title}, line ${index + 1}`} column={column} draft={draft} onDraft={onDraft} onKeyDown={onEditorKey} onLeave={onLeave} />
            ) : (
              (column.show?.(row) ?? column.choices?.find(({ value }) => value === column.text(row))?.label ?? column.text(row))
            )}
            {problem && (
              <span id={problemId} className={classes['problem']}>
                {problem}
              </span>
            )}
          </td>
        );
      })}
    </tr>
  );
}

/** Drawn anew only when its own row, or the keyboard in it, has changed. */
export const SheetRow = memo(Row) as typeof Row;
