import { must } from '../arithmetic/index.ts';
import { dayNumber } from '../due/index.ts';
import { cents, sum, type Cents } from '../money/index.ts';
import type { Trade, Waiver } from './types.ts';

/** What must hold before exposure is computed. Throws InvalidInput naming the field, such as `trades.0.waivers.2.throughOn`. */
export function checkTrades(trades: readonly Trade[]): void {
  const ids = new Set<string>();
  trades.forEach((trade, i) => {
    const field = `trades.${i}`;
    once(ids, trade.id, `${field}.id`);
    notNegative(trade.committedCents, `${field}.committedCents`);
    notNegative(trade.retainageHeldCents, `${field}.retainageHeldCents`);
    checkInvoices(trade, field);
    trade.payments.forEach((payment, n) => {
      dayNumber(payment.on, `${field}.payments.${n}.on`);
      notNegative(payment.amountCents, `${field}.payments.${n}.amountCents`);
      must(payment.reference.trim().length > 0, `${field}.payments.${n}.reference`, payment.reference, 'must name the check or transfer');
    });
    const waivers = new Set<string>();
    trade.waivers.forEach((waiver, n) => {
      once(waivers, waiver.id, `${field}.waivers.${n}.id`);
      checkWaiver(waiver, `${field}.waivers.${n}`);
    });
  });
}

function checkInvoices(trade: Trade, field: string): void {
  const ids = new Set<string>();
  trade.invoices.forEach((invoice, n) => {
    once(ids, invoice.id, `${field}.invoices.${n}.id`);
    dayNumber(invoice.throughOn, `${field}.invoices.${n}.throughOn`);
    notNegative(invoice.amountCents, `${field}.invoices.${n}.amountCents`);
  });
  const invoiced = sum(trade.invoices.map(({ amountCents }) => amountCents), `${field}.invoices`);
  must(trade.retainageHeldCents <= invoiced, `${field}.retainageHeldCents`, trade.retainageHeldCents, 'must be at most what was invoiced');
}

function checkWaiver(waiver: Waiver, field: string): void {
  dayNumber(waiver.throughOn, `${field}.throughOn`);
  must(waiver.effect === 'conditional' || waiver.effect === 'unconditional', `${field}.effect`, waiver.effect, 'must be conditional or unconditional');
  must(waiver.stage === 'progress' || waiver.stage === 'final', `${field}.stage`, waiver.stage, 'must be progress or final');
  if (waiver.stage === 'progress') notNegative(waiver.amountCents, `${field}.amountCents`);
  else notNegative(waiver.exceptedCents, `${field}.exceptedCents`);
}

function notNegative(amount: Cents, field: string): void {
  must(cents(amount, field) >= 0, field, amount, 'must not be negative');
}

function once(known: Set<string>, id: string, field: string): void {
  must(!known.has(id), field, id, 'must be named once');
  known.add(id);
}
