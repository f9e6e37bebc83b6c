import { sum, type Cents } from '../money/index.ts';
import type { TradeInvoice, Waiver } from './types.ts';

/**
 * How much of what was invoiced these waivers cover, in cents. By through date: a progress waiver adds its sum, up to what was invoiced
 * through its date, so that one for more than that never covers later work; a final one lifts the cover to everything invoiced through
 * its date less what it excepts. Neither the order of waivers nor that of invoices matters. Exact, nothing is rounded.
 */
export function covered(invoices: readonly TradeInvoice[], waivers: readonly Waiver[]): Cents {
  return [...waivers].sort(byDate).reduce((before, waiver) => {
    const invoiced = sum(invoices.filter(({ throughOn }) => throughOn <= waiver.throughOn).map(({ amountCents }) => amountCents));
    return waiver.stage === 'progress' ? Math.min(sum([before, waiver.amountCents]), invoiced) : Math.max(before, sum([invoiced, -waiver.exceptedCents]));
  }, 0);
}

// on one day progress waivers come first: the other way round they could cover what the final one excepts
function byDate(a: Waiver, b: Waiver): number {
  if (a.throughOn !== b.throughOn) return a.throughOn < b.throughOn ? -1 : 1;
  return Number(a.stage === 'final') - Number(b.stage === 'final');
}

/** The latest of some dates; null of none. */
export const latest = (dates: readonly string[]): string | null => dates.reduce<string | null>((most, on) => (most === null || on > most ? on : most), null);
