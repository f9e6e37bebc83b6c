import { formatAmount, parseMoney } from '../../money/index.ts';

/** A worked example from outside: its figures as its list prints them, and the same from our functions. */
export interface Example {
  /** Its name in the list. */
  id: string;
  what: string;
  source: string;
  figures: readonly string[];
  compute: () => readonly string[] | Promise<readonly string[]>;
}

/** Cents as the list prints them: -1234567 is "-12345.67". */
export const dollars = (cents: number): string => formatAmount(cents).replaceAll(',', '').replace('−', '-');

/** "12345.67" as cents. */
export const inCents = (printed: string): number => parseMoney(printed);
