import { cellText, type GridRow } from './grid.ts';

export type ColumnField = 'number' | 'phase' | 'description' | 'scheduled' | 'allowance' | 'milestone';
/** Which column (from 0) holds which field. */
export type Columns = Partial<Record<ColumnField, number>>;

export interface Header {
  row: number;
  columns: Columns;
}

// names as builders write them, most telling first; a name that fits two fields goes to the one that lacks a better column
const NAMES: Readonly<Record<ColumnField, readonly RegExp[]>> = {
  scheduled: [/^schedul\w* (value|amount|sum)$/, /^schedul\w*$/, /^(contract )?(value|amount|price|sum)$/, /^(total|cost|budget)$/],
  description: [/^description/, /^(scope|work|trade|task)( of work| item)?$/, /^(line |work )?item$/, /^name$/],
  number: [/^(no|nr|num|number|#)$/, /^(item|line|cost|row) ?(no|nr|num|number|#|code)$/, /^(code|id|item|line)$/],
  phase: [/^phases?$/, /^(section|division|stage|category|group|part)( name)?$/],
  allowance: [/^(is )?allowance$/, /^allow$/],
  milestone: [/^milestones?$/],
};
const ORDER = Object.keys(NAMES) as ColumnField[];
/** How far down a header is looked for; above it stand titles and addresses. */
const DEPTH = 60;

const plain = (text: string): string =>
  text.toLowerCase().replace(/\(.*?\)|[$?:.*]/g, ' ').replace(/\bus\b|\busd\b/g, ' ').replace(/[_/-]/g, ' ').replace(/\s+/g, ' ').trim();

/** Finds the row that names the columns. Without a description and a scheduled value it is no schedule: null. */
export function findHeader(rows: readonly GridRow[]): Header | null {
  let best: Header | null = null;
  for (const row of rows.slice(0, DEPTH)) {
    const columns = matchColumns(row);
    const better = Object.keys(columns).length > Object.keys(best?.columns ?? {}).length;
    if (columns.description !== undefined && columns.scheduled !== undefined && better) best = { row: row.row, columns };
  }
  return best;
}

function matchColumns(row: GridRow): Columns {
  const names = row.cells.map((cell) => plain(cellText(cell)));
  const columns: Columns = {};
  const taken = new Set<number>();
  const rounds = Math.max(...ORDER.map((field) => NAMES[field].length));
  for (let round = 0; round < rounds; round += 1) {
    for (const field of ORDER) {
      const pattern = NAMES[field][round];
      const at = columns[field] === undefined && pattern ? names.findIndex((name, i) => !taken.has(i) && pattern.test(name)) : -1;
      if (at < 0) continue;
      columns[field] = at;
      taken.add(at);
    }
  }
  return columns;
}
