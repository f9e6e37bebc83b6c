import { Button } from '@mantine/core';
import { formatMoney } from '@tallypole/shared/money';
import { readScheduled } from '@tallypole/shared/schedule-of-values';
import type { CellEdit, SheetColumn } from '../../../ui/line-sheet/types.ts';
import { LineSheet } from '../../../ui/line-sheet/line-sheet.tsx';
import { Money } from '../../../ui/money.tsx';
import type { ImportState, SheetLine } from '../import-state.ts';
import { strings } from '../strings.ts';
import classes from './schedule.module.css';

const { columns: titles, kinds } = strings;
const text = (key: 'number' | 'phase' | 'description' | 'milestone', title: string, width?: string): SheetColumn<SheetLine> => ({
  key, title, edit: true, ...(width ? { width } : {}), text: ({ draft }) => draft[key], problem: ({ problems }) => problems[key] ?? null,
});

const COLUMNS: readonly SheetColumn<SheetLine>[] = [
  { key: 'row', title: titles.row, width: '3.2rem', align: 'right', text: ({ draft }) => (draft.row === null ? '' : String(draft.row)) },
  text('number', titles.number, '4rem'),
  text('phase', titles.phase, '18%'),
  text('description', titles.description),
  {
    key: 'scheduled', title: titles.scheduled, width: '9rem', align: 'right', edit: true, inputMode: 'decimal',
    text: ({ draft }) => draft.scheduled,
    show: ({ draft }) => {
      const cents = readScheduled(draft.scheduled);
      return typeof cents === 'number' ? formatMoney(cents) : draft.scheduled;
    },
    problem: ({ problems }) => problems.scheduled ?? null,
  },
  { key: 'kind', title: titles.kind, width: '7rem', edit: true, text: ({ draft }) => draft.kind, choices: (['base', 'allowance', 'contingency'] as const).map((value) => ({ value, label: kinds[value] })) },
  text('milestone', titles.milestone, '16%'),
];

interface DraftSheetProps {
  state: ImportState;
  onEdit: (edits: CellEdit[]) => void;
  onAdd: (scheduled: string) => void;
  onRemove: (id: string) => void;
}

/** The lines as they were read, each cell with its problem, to be put right in place. */
export function DraftSheet({ state, onEdit, onAdd, onRemove }: DraftSheetProps) {
  const { lines, check } = state;
  const gap = check.differenceCents > 0 ? formatMoney(check.differenceCents) : null;
  const last = lines.at(-1);
  return (
    <>
      <p className="quiet">{strings.linesHint}</p>
      <LineSheet label={strings.linesTitle} rows={lines} rowKey={({ id }) => id} columns={COLUMNS} onEdit={onEdit} canGrow totals={{ description: strings.total, scheduled: <Money cents={check.sumCents} /> }} />
      <div className={classes['lineActs']}>
        {gap === null ? null : <Button variant="outline" onClick={() => onAdd(gap)}>{strings.addMissing(gap)}</Button>}
        <Button variant="subtle" onClick={() => onAdd('')}>{strings.addLine}</Button>
        {last?.draft.row === null ? <Button variant="subtle" onClick={() => onRemove(last.id)}>{strings.removeLine(lines.length)}</Button> : null}
      </div>
    </>
  );
}
