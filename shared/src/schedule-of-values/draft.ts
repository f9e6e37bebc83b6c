import { InvalidInput } from '../arithmetic/index.ts';
import { formatMoney, minus, parseMoney, sum, type Cents } from '../money/index.ts';

export type LineKind = 'base' | 'allowance' | 'contingency';

/** A line as it was read or typed, before it is a line of the schedule: the sum still as text. */
export interface DraftLine {
  /** The row of the file it came from; null for a line that was added by hand. */
  row: number | null;
  number: string;
  phase: string;
  description: string;
  scheduled: string;
  kind: LineKind;
  /** The milestone that proves it; empty for a general line of the whole job. */
  milestone: string;
}

export type DraftField = 'number' | 'phase' | 'description' | 'scheduled' | 'milestone';

/** What is wrong with one cell of a draft. `line` counts from 0. */
export interface DraftProblem {
  line: number;
  field: DraftField;
  message: string;
}

export interface DraftCheck {
  problems: DraftProblem[];
  /** The lines that can be read, added up. */
  sumCents: Cents;
  contractSumCents: Cents;
  /** Contract sum − sum of the lines: positive when something is missing. */
  differenceCents: Cents;
  /** Nothing is wrong and the sum is the contract sum. */
  ready: boolean;
}

export const MOST_LINES = 2_000;
export const MOST_MILESTONES = 60;
const MOST_TEXT: Readonly<Record<Exclude<DraftField, 'scheduled'>, number>> = { number: 20, phase: 120, description: 300, milestone: 120 };
const LABEL: Readonly<Record<DraftField, string>> = { number: 'No.', phase: 'Phase', description: 'Description', scheduled: 'Scheduled value', milestone: 'Milestone' };

/** Checks drafts as a whole: each cell, numbers that stand twice, and the sum against the contract sum. */
export function checkDrafts(lines: readonly DraftLine[], contractSumCents: Cents): DraftCheck {
  const problems: DraftProblem[] = [];
  const amounts: Cents[] = [];
  const firstOf = new Map<string, number>();
  lines.forEach((draft, line) => {
    const amount = readScheduled(draft.scheduled);
    if (typeof amount === 'number') amounts.push(amount);
    else problems.push({ line, field: 'scheduled', message: amount.message });
    problems.push(...textProblems(draft, line));
    const first = firstOf.get(draft.number);
    if (draft.number !== '' && first !== undefined) problems.push({ line, field: 'number', message: `No. ${draft.number} stands twice; it is also ${place(lines[first], first)}.` });
    else firstOf.set(draft.number, line);
  });
  const sumCents = sum(amounts);
  const differenceCents = minus(contractSumCents, sumCents);
  return { problems, sumCents, contractSumCents, differenceCents, ready: problems.length === 0 && lines.length > 0 && differenceCents === 0 };
}

/** A scheduled value in cents, or why the text is none. Sums of zero or less are refused: deductions belong to changes. */
export function readScheduled(text: string): Cents | { message: string } {
  if (text.trim() === '') return { message: 'Enter the scheduled value.' };
  if (text.startsWith('#')) return { message: `The cell shows the error ${text.slice(0, 20)}.` };
  try {
    const amount = parseMoney(text.replace(/\bUSD?\b/gi, ''));
    return amount > 0 ? amount : { message: 'The scheduled value must be more than zero.' };
  } catch (error) {
    if (!(error instanceof InvalidInput)) throw error;
    const threePlaces = /^[^a-z]*\.\d{3,}\D*$/i.test(text);
    return { message: threePlaces ? `Round "${text}" to whole cents.` : `"${text.slice(0, 40)}" is not a sum of money such as 12,400.50.` };
  }
}

/** What stands between a draft and its import, in a sentence; null when the sum is right. */
export function sumProblem({ differenceCents, sumCents, contractSumCents }: Pick<DraftCheck, 'differenceCents' | 'sumCents' | 'contractSumCents'>): string | null {
  if (differenceCents === 0) return null;
  const [gap, word] = differenceCents > 0 ? [differenceCents, 'missing'] : [minus(0, differenceCents), 'too much'];
  return `The lines add up to ${formatMoney(sumCents)}, the contract sum is ${formatMoney(contractSumCents)}: ${formatMoney(gap)} ${word}.`;
}

function textProblems(draft: DraftLine, line: number): DraftProblem[] {
  const problems: DraftProblem[] = [];
  for (const field of ['number', 'phase', 'description', 'milestone'] as const) {
    const text = draft[field].trim();
    if (text === '' && (field === 'phase' || field === 'description')) problems.push({ line, field, message: `Enter the ${LABEL[field].toLowerCase()}.` });
    if (text.startsWith('#') && /^#[A-Z/0!?]+$/.test(text)) problems.push({ line, field, message: `The cell shows the error ${text}.` });
    if ([...text].length > MOST_TEXT[field]) problems.push({ line, field, message: `${LABEL[field]} must have at most ${MOST_TEXT[field]} characters.` });
  }
  return problems;
}

const place = (draft: DraftLine | undefined, index: number): string => (draft?.row ? `in row ${draft.row}` : `line ${index + 1}`);
