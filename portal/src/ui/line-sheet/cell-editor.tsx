import { useEffect, useRef, type KeyboardEvent } from 'react';
import type { SheetColumn } from './types.ts';
import classes from './line-sheet.module.css';

interface CellEditorProps {
  label: string;
  column: Pick<SheetColumn<unknown>, 'choices' | 'inputMode' | 'align'>;
  draft: string;
  onDraft: (text: string) => void;
  onKeyDown: (event: KeyboardEvent) => void;
  onLeave: () => void;
}

/** The field that takes a cell's place while it is edited. */
export function CellEditor({ label, column, draft, onDraft, onKeyDown, onLeave }: CellEditorProps) {
  const field = useRef<HTMLInputElement & HTMLSelectElement>(null);
  useEffect(() => field.current?.focus(), []);
  const shared = { ref: field, 'aria-label': label, value: draft, onBlur: onLeave, onKeyDown, className: classes['editor'], 'data-align': column.align };
  if (!column.choices) return <input {...shared} inputMode={column.inputMode} autoComplete="off" spellCheck={false} onChange={(event) => onDraft(event.currentTarget.value)} />;
  return (
    <select {...shared} onChange={(event) => onDraft(event.currentTarget.value)}>
      {column.choices.map(({ value, label: name }) => (
        <option key={value} value={value}>
          {name}
        </option>
      ))}
    </select>
  );
}
