import type { ImportState } from '../import-state.ts';
import { strings } from '../strings.ts';
import classes from './schedule.module.css';

/** Each problem and note by its place in the file; what was put right is gone from it. */
export function ProblemList({ state }: { state: ImportState }) {
  const { lines, notes, check } = state;
  const errors = check.problems.map(({ line, field, message }) => {
    const row = lines[line]?.draft.row ?? null;
    const name = strings.columns[field];
    return { key: `${line} ${field} ${message}`, place: row === null ? strings.line(line + 1, name) : `${strings.row(row, null)}, ${name}`, message, error: true };
  });
  const others = notes.map(({ row, column, message }) => ({ key: `note ${row} ${column ?? ''} ${message}`, place: strings.row(row, column), message, error: false }));
  const all = [...errors, ...others];
  if (all.length === 0) return <p>{strings.nothingWrong}</p>;
  return (
    <ul className={classes['problems']}>
      {all.map(({ key, place, message, error }) => (
        <li key={key} data-error={error || undefined}>
          <strong>{place}</strong> {message}
        </li>
      ))}
    </ul>
  );
}
