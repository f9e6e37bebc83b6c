import type { Stripe } from 'stripe';
import type { Store, Tx } from './store.mjs';

/** What Stripe itself would show: typed by the SDK, so that tsc refuses a missing or misspelled field. */
export interface PublicKinds {
  account: Stripe.Account;
  'checkout.session': Stripe.Checkout.Session;
  payment_intent: Stripe.PaymentIntent;
  payment_method: Stripe.PaymentMethod;
  charge: Stripe.Charge;
  refund: Stripe.Refund;
  dispute: Stripe.Dispute;
  balance_transaction: Stripe.BalanceTransaction;
  application_fee: Stripe.ApplicationFee;
  payout: Stripe.Payout;
  event: StoredEvent;
  webhook_endpoint: Stripe.WebhookEndpoint;
}

/** What only the stand-in knows. */
export interface PrivateKinds {
  platform: { id: string; account: string; application: string };
  session_detail: SessionDetail;
  link: Link;
  plan: Plan;
  paid_out: { id: string; payout: string };
  endpoint_detail: { id: string; secret: string; connect: boolean | 'both' };
  delivery: Delivery;
  rule: Rule;
  fault: Fault;
  key: SavedAnswer;
  setting: { id: string; value: number };
}

export interface Kinds extends PublicKinds, PrivateKinds {}
export type Kind = keyof Kinds;
export type PublicKind = keyof PublicKinds;

/** An event as it is kept: the SDK's union by `type` is narrowed only when it is read back. */
export interface StoredEvent {
  id: string;
  object: 'event';
  account?: string;
  api_version: string | null;
  created: number;
  data: { object: object; previous_attributes?: object };
  livemode: boolean;
  pending_webhooks: number;
  request: Stripe.Event.Request | null;
  type: Stripe.Event.Type;
}

export interface SessionDetail {
  id: string;
  line_items: Stripe.LineItem[];
  intent: {
    application_fee_amount: number | null;
    description: string | null;
    metadata: Stripe.Metadata;
    receipt_email: string | null;
    statement_descriptor: string | null;
    statement_descriptor_suffix: string | null;
    transfer_group: string | null;
  };
}

/** An onboarding link: works once, for a few minutes. */
export interface Link {
  id: string;
  account: string;
  refresh_url: string;
  return_url: string;
  expires_at: number;
  used: boolean;
}

export type Outcome = 'settles' | 'fails' | 'returned' | 'disputed' | 'card_paid' | 'card_declined' | 'card_disputed';
export type Step = 'settle' | 'fail' | 'return' | 'dispute' | 'expire' | 'refund';

/** Something that the future holds for an object: `at` is in milliseconds, null waits for a control call. */
export interface Plan {
  id: string;
  step: Step;
  at: number | null;
  code?: string;
  /** what follows once a debit has settled */
  then?: { step: 'return' | 'dispute'; after: number | null };
}

export interface Delivery {
  id: string;
  event: string;
  type: string;
  endpoint: string;
  state: 'waiting' | 'held' | 'delivered' | 'dropped' | 'gave_up';
  /** when to try (next), in milliseconds of the real clock */
  at: number;
  created: number;
  /** how many times to send even when the first is accepted */
  copies: number;
  forge?: Forge;
  attempts: Attempt[];
}
export type Forge = 'bad_signature' | 'old_timestamp' | 'no_signature';
export interface Attempt {
  at: number;
  ms: number;
  status?: number;
  error?: string;
  forge?: Forge;
}

/** What befalls the deliveries of events whose type matches, until `times` is used up. */
export interface Rule {
  id: string;
  type: string;
  account?: string;
  action: 'hold' | 'drop' | 'twice' | 'delay' | 'bad_signature' | 'old_timestamp' | 'no_signature';
  ms?: number;
  times: number | null;
}

/** An outage: which calls it hits, and what becomes of them. */
export interface Fault {
  id: string;
  mode: 'error' | 'error_stored' | 'error_after' | 'hang' | 'hang_after' | 'drop' | 'drop_after' | 'slow';
  method?: string;
  path?: string;
  status: number;
  ms: number;
  times: number | null;
}

export interface SavedAnswer {
  id: string;
  input: string;
  path: string;
  status: number;
  body: string;
  request: string;
  at: number;
}

export type Form = { [name: string]: FormValue };
export type FormValue = string | Form | FormValue[];

export interface Settings {
  /** milliseconds until a bank debit settles; negative: only when told to */
  settle_after_ms: number;
  /** milliseconds between settlement and a late return or dispute; negative: only when told to */
  return_after_ms: number;
  /** how long a new object stays invisible to search */
  search_lag_ms: number;
  /** first pause before a webhook is sent again; doubles up to a minute */
  retry_base_ms: number;
  webhook_timeout_ms: number;
  /** how far the stand-in's clock is ahead of the real one */
  clock_offset_ms: number;
}

export interface World {
  store: Store;
  platform: string;
  /** the platform's id as an application, for application fees */
  application: string;
  /** where people reach the hosted pages, without a trailing slash */
  url: string;
  settings(): Settings;
  /** the stand-in's clock in milliseconds */
  nowMs(): number;
  log(line: string): void;
  /** runs one act in a transaction of its own, then looks what is due */
  act<T>(account: string, work: (act: Act) => T, request?: Act['request']): T;
  /** sends one delivery now, whatever its state */
  send(delivery: string, forge?: Forge): Promise<Attempt>;
}

/** One act on one account, inside one transaction. */
export interface Act {
  tx: Tx;
  world: World;
  account: string;
  /** seconds, as Stripe counts */
  now: number;
  request: { id: string | null; idempotency_key: string | null };
}

export interface Reply {
  status: number;
  body: object;
}
