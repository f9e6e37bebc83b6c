/** What a figure is, so that a page or a paper can print it: whole cents, basis points (10,000 = 100 %), a decimal with its unit, a date, days, or words. */
export type Figure =
  | { kind: 'money'; cents: number }
  | { kind: 'rate'; basisPoints: number }
  | { kind: 'quantity'; value: string; unit: string }
  | { kind: 'date'; date: string }
  | { kind: 'text'; text: string };

/** The record a given figure was taken from, so that a reader can go and look at it. */
export interface Origin {
  record: 'job' | 'line' | 'change' | 'draw' | 'payment' | 'loan' | 'milestone' | 'photo' | 'terms' | 'worksheet' | 'trade' | 'table';
  id: string;
  label: string;
}

/**
 * One step of a computation: what it is called, by which rule it follows from its inputs, its exact value before
 * rounding (a decimal or fraction as text, in the result's unit; dollars for money) where rounding happened, and the result.
 * A step without inputs is a given figure and may name its origin.
 */
export interface Step {
  label: string;
  rule: string;
  result: Figure;
  exact?: string;
  inputs: readonly Step[];
  origin?: Origin;
}

export const money = (cents: number): Figure => ({ kind: 'money', cents });
export const rate = (basisPoints: number): Figure => ({ kind: 'rate', basisPoints });
export const quantity = (value: string | number, unit: string): Figure => ({ kind: 'quantity', value: String(value), unit });
export const date = (iso: string): Figure => ({ kind: 'date', date: iso });
export const text = (words: string): Figure => ({ kind: 'text', text: words });

/** A figure that was given, not computed. */
export function given(label: string, result: Figure, origin?: Origin): Step {
  return { label, rule: 'given', result, inputs: [], ...(origin ? { origin } : {}) };
}

/** A figure that follows from others; `exact` is named where rounding took place. */
export function step(label: string, rule: string, result: Figure, inputs: readonly Step[], exact?: string): Step {
  return { label, rule, result, inputs, ...(exact === undefined ? {} : { exact }) };
}
