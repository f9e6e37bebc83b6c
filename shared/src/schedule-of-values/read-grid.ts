import { minus, sum, formatMoney, type Cents } from '../money/index.ts';
import { MOST_LINES, checkDrafts, readScheduled, type DraftCheck, type DraftField, type DraftLine, type LineKind } from './draft.ts';
import { cellText, columnLetter, isBlankRow, type GridRow } from './grid.ts';
import { findHeader, type ColumnField, type Columns, type Header } from './header.ts';

/** Something to know about a place in the file. An error stops the import, a note doesn't. */
export interface ReadingProblem {
  row: number;
  column: string | null;
  severity: 'error' | 'note';
  message: string;
}

export interface ScheduleReading extends Omit<DraftCheck, 'problems' | 'ready'> {
  headerRow: number;
  columns: { field: ColumnField; column: string; title: string }[];
  lines: DraftLine[];
  problems: ReadingProblem[];
}

const TOTAL = /^((grand|sub|phase|section|contract|job)[ -]?)?totals?( (of|for|contract|price|cost|amount|value|sum)\b.*)?:?$|\b(sub)?total:?$/i;
const GENERAL = /^(general|general conditions|general requirements|overhead|whole job|job-wide)$/i;
const YES = /^(yes|y|x|true|1|allowance|allow|✓|✔)$/i;
const DASH = /^[-–—]$/;

/** Whether a phase's lines belong to the whole job instead of a milestone. */
export const isGeneralPhase = (phase: string): boolean => GENERAL.test(phase.trim());

/** Reads a sheet into draft lines. Returns null where no row names a description and a scheduled value. */
export function readGrid(rows: readonly GridRow[], contractSumCents: Cents): ScheduleReading | null {
  const header = findHeader(rows);
  if (!header) return null;
  const reader = new GridReader(header);
  for (const row of rows) if (row.row > header.row) reader.take(row);
  reader.finish();
  const { lines, notes } = reader;
  const { problems, ...check } = checkDrafts(lines, contractSumCents);
  const found = problems.map(({ line, field, message }) => ({ row: lines[line]?.row ?? header.row, column: letterOf(header.columns, field), severity: 'error' as const, message }));
  const titles = rows.find(({ row }) => row === header.row)?.cells ?? [];
  const columns = Object.entries(header.columns).map(([field, at]) => ({ field: field as ColumnField, column: columnLetter(at), title: cellText(titles[at]) }));
  return { headerRow: header.row, columns, lines, problems: [...found, ...notes].sort((a, b) => a.row - b.row), ...check };
}

const letterOf = (columns: Columns, field: DraftField): string | null => {
  const at = columns[field];
  return at === undefined ? null : columnLetter(at);
};

class GridReader {
  readonly lines: DraftLine[] = [];
  readonly notes: ReadingProblem[] = [];
  private phase = '';
  /** Where the lines since the last total begin, and the row of that total. */
  private sectionStart = 0;
  private totalAt = 0;

  constructor(private readonly header: Header) {}

  take(row: GridRow): void {
    if (isBlankRow(row)) return;
    const cell = (field: ColumnField) => cellText(row.cells[this.header.columns[field] ?? -1]);
    const [number, phase, description, scheduled] = [cell('number'), cell('phase'), cell('description'), cell('scheduled').replace(DASH, '')];
    if (row.cells.some((found) => TOTAL.test(cellText(found))) && number === '') return this.total(row, scheduled);
    if (description.toLowerCase() === 'description' || this.isHeaderAgain(row)) return;
    if (scheduled === '' && number === '' && (phase === '') !== (description === '')) return this.heading(phase === '' ? description : phase);
    if (phase !== '') this.phase = phase;
    if (row.hidden) this.note(row.row, null, 'This row is hidden in the file and was read all the same.');
    this.lines.push({ row: row.row, number, phase: this.phase, description, scheduled, kind: kindOf(cell('allowance'), description, this.header.columns.allowance !== undefined), milestone: this.milestone(cell('milestone')) });
    if (this.lines.length === MOST_LINES + 1) this.problem(row.row, null, `A schedule has at most ${MOST_LINES} lines.`);
  }

  /** What stands below the last total may be an option that is not part of the contract. */
  finish(): void {
    const below = this.totalAt > 0 ? this.lines[this.sectionStart] : undefined;
    if (below?.row) this.note(below.row, null, `From here on the lines stand below the last total, in row ${this.totalAt}. They were read all the same.`);
  }

  private milestone(given: string): string {
    if (given !== '' || this.header.columns.milestone !== undefined) return given;
    return isGeneralPhase(this.phase) ? '' : this.phase;
  }

  private isHeaderAgain(row: GridRow): boolean {
    return findHeader([row]) !== null;
  }

  /** A row that only names the phase of the rows below it. */
  private heading(phase: string): void {
    this.phase = phase;
  }

  /** A total row is no line; what it says is compared with the lines above it, as a total of all or of its part. */
  private total(row: GridRow, text: string): void {
    const amounts = this.lines.map(({ scheduled }) => readScheduled(scheduled)).map((amount) => (typeof amount === 'number' ? amount : 0));
    const [all, section] = [sum(amounts), sum(amounts.slice(this.sectionStart))];
    this.sectionStart = this.lines.length;
    this.totalAt = row.row;
    const said = readScheduled(text);
    if (text === '') return;
    const column = letterOf(this.header.columns, 'scheduled');
    if (typeof said !== 'number') this.note(row.row, column, `The total was not compared: ${said.message}`);
    else if (said !== all && said !== section) {
      const off = minus(said, all);
      const gap = off > 0 ? `${formatMoney(off)} less` : `${formatMoney(minus(0, off))} more`;
      this.note(row.row, column, `The total says ${formatMoney(said)}, but the lines above it add up to ${formatMoney(all)}: ${gap}.`);
    }
  }

  private note(row: number, column: string | null, message: string): void {
    this.notes.push({ row, column, severity: 'note', message });
  }

  private problem(row: number, column: string | null, message: string): void {
    this.notes.push({ row, column, severity: 'error', message });
  }
}

function kindOf(allowance: string, description: string, asked: boolean): LineKind {
  if (asked ? YES.test(allowance) : /\ballowance\b/i.test(description)) return 'allowance';
  return /\bcontingency\b/i.test(description) ? 'contingency' : 'base';
}
