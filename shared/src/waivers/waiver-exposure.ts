import { date, given, money, step, type Origin, type Step } from '../arithmetic/index.ts';
import { atLeastZero, minus, sum } from '../money/index.ts';
import { checkTrades } from './check-trades.ts';
import { covered, latest } from './coverage.ts';
import type { Trade, TradeExposure, Waiver, WaiverExposure } from './types.ts';

/**
 * What trades could still claim on the house: per trade what it invoiced less what its unconditional waivers cover, never below 0, and
 * the sum over the job. Conditional waivers never count as cover; what they would add stands beside it, as do the trade's subcontract,
 * its own retainage and what the builder paid it. All amounts in cents, exact. An aid for asking for papers, no legal opinion: lien
 * rights, forms and deadlines are the state's (through date, sum and exceptions as on prescribed forms such as Cal. Civ. Code
 * 8132–8138); local law and counsel decide. Throws InvalidInput naming the field.
 */
export function waiverExposure(trades: readonly Trade[]): WaiverExposure {
  checkTrades(trades);
  const each = trades.map(exposureOf);
  const exposureCents = sum(each.map((trade) => trade.exposureCents), 'exposure');
  return { trades: each, exposureCents, steps: step('Open to claims', 'sum over the trades', money(exposureCents), each.map((trade) => trade.steps)) };
}

function exposureOf(trade: Trade): TradeExposure {
  const { id, name, committedCents, retainageHeldCents, invoices, waivers } = trade;
  const unconditional = waivers.filter(({ effect }) => effect === 'unconditional');
  const invoicedCents = sum(invoices.map(({ amountCents }) => amountCents));
  const coveredCents = covered(invoices, unconditional);
  const shown = {
    id,
    name,
    committedCents,
    invoicedCents,
    invoicedThroughOn: latest(invoices.map(({ throughOn }) => throughOn)),
    retainageHeldCents,
    paidCents: sum(trade.payments.map(({ amountCents }) => amountCents)),
    coveredCents,
    coveredThroughOn: latest(unconditional.map(({ throughOn }) => throughOn)),
    conditionalOnlyCents: minus(covered(invoices, waivers), coveredCents),
    exposureCents: atLeastZero(minus(invoicedCents, coveredCents)),
  };
  return { ...shown, steps: explain(trade, shown) };
}

function explain(trade: Trade, shown: Omit<TradeExposure, 'steps'>): Step {
  const origin: Origin = { record: 'trade', id: trade.id, label: trade.name };
  const of = (effect: Waiver['effect']) => trade.waivers.filter((waiver) => waiver.effect === effect).map(waiverStep);
  const through = (on: string | null) => (on === null ? [] : [given('Through', date(on))]);
  const invoices = trade.invoices.map((invoice) => given(`Invoiced for work through ${invoice.throughOn}`, money(invoice.amountCents), origin));
  const payments = trade.payments.map((payment) => given(`${payment.on}, ${payment.reference}`, money(payment.amountCents), origin));
  return step(trade.name, 'invoiced − covered by unconditional waivers, at least 0; what follows these two is shown beside it', money(shown.exposureCents), [
    step('Invoiced', 'sum of its invoices', money(shown.invoicedCents), [...invoices, ...through(shown.invoicedThroughOn)]),
    step('Covered for good', 'what unconditional waivers release, at most what was invoiced through their dates', money(shown.coveredCents), [...of('unconditional'), ...through(shown.coveredThroughOn)]),
    step('Covered once paid', 'what conditional waivers would release besides; no cover until then', money(shown.conditionalOnlyCents), of('conditional')),
    given('Its subcontract', money(shown.committedCents), origin),
    given('Held back from it', money(shown.retainageHeldCents), origin),
    step('Paid to it', 'sum of the payments', money(shown.paidCents), payments),
  ]);
}

function waiverStep(waiver: Waiver): Step {
  const what = `through ${waiver.throughOn}`;
  if (waiver.stage === 'progress') return given(`Progress waiver ${what}`, money(waiver.amountCents));
  return step(`Final waiver ${what}`, 'everything invoiced through its date, less what it excepts', date(waiver.throughOn), [given('Excepted', money(waiver.exceptedCents))]);
}
