import type { Step } from '../arithmetic/index.ts';
import type { Cents } from '../money/index.ts';
import type { BusinessDate } from '../due/index.ts';

/** What a trade asked the builder for: its gross sum before the trade's own retainage, for work through a date. */
export interface TradeInvoice {
  id: string;
  throughOn: BusinessDate;
  amountCents: Cents;
}

/** What the builder paid the trade, with the check or transfer it was paid by. */
export interface TradePayment {
  on: BusinessDate;
  reference: string;
  amountCents: Cents;
}

/**
 * A lien waiver of a trade. A conditional one takes effect only once its payment has arrived, so it covers nothing by itself.
 * A progress waiver covers its sum, but nothing that was invoiced for work after its through date; a final one covers everything
 * invoiced through its date but what it excepts.
 */
export type Waiver = { id: string; effect: 'conditional' | 'unconditional'; throughOn: BusinessDate } & (
  | { stage: 'progress'; amountCents: Cents }
  | { stage: 'final'; exceptedCents: Cents }
);

export interface Trade {
  id: string;
  name: string;
  /** Its subcontract with the changes to it. */
  committedCents: Cents;
  /** What the builder holds back from the trade, to date. */
  retainageHeldCents: Cents;
  invoices: readonly TradeInvoice[];
  payments: readonly TradePayment[];
  waivers: readonly Waiver[];
}

export interface TradeExposure {
  id: string;
  name: string;
  committedCents: Cents;
  invoicedCents: Cents;
  /** The latest through date that was invoiced; null before the first invoice. */
  invoicedThroughOn: BusinessDate | null;
  retainageHeldCents: Cents;
  paidCents: Cents;
  coveredCents: Cents;
  /** The latest through date of an unconditional waiver; null without one. */
  coveredThroughOn: BusinessDate | null;
  /** What conditional waivers would cover besides, once their payments have arrived. */
  conditionalOnlyCents: Cents;
  exposureCents: Cents;
  steps: Step;
}

export interface WaiverExposure {
  trades: TradeExposure[];
  exposureCents: Cents;
  steps: Step;
}
