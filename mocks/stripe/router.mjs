import { missing, StripeFailure } from './errors.mjs';
import { readParams } from './params.mjs';
import { present } from './present.mjs';
import * as accounts from './resources/accounts.mjs';
import * as balance from './resources/balance.mjs';
import * as charges from './resources/charges.mjs';
import { listEvents } from './resources/events.mjs';
import * as intents from './resources/payment-intents.mjs';
import * as sessions from './resources/sessions.mjs';
import * as endpoints from './resources/webhook-endpoints.mjs';

/**
 * @typedef {{ act: import('./types.d.ts').Act, form: import('./types.d.ts').Form, params: Record<string, string>, path: string }} Call
 * @typedef {(call: Call) => object} Handler
 * @typedef {{ method: string, pattern: RegExp, handler: Handler }} Route
 */

/**
 * A retrieve that needs no word of its own.
 * @param {import('./types.d.ts').PublicKind} kind
 * @param {string} [param]
 * @returns {Handler}
 */
const one =
  (kind, param) =>
  ({ act, params, form }) => {
    readParams({}, form);
    const found = act.tx.find(kind, params['id'] ?? '', act.account);
    if (!found) throw missing(kind, params['id'] ?? '', param);
    return present(act.tx, kind, found, act.now);
  };

/** @type {Array<[string, Handler]>} */
const table = [
  ['GET /v1/account', accounts.retrieveAccount],
  ['POST /v1/accounts', accounts.createAccount],
  ['GET /v1/accounts', accounts.listAccounts],
  ['GET /v1/accounts/:id', accounts.retrieveAccount],
  ['POST /v1/accounts/:id', accounts.updateAccount],
  ['POST /v1/accounts/:id/login_links', accounts.createLoginLink],
  ['POST /v1/account_links', accounts.createAccountLink],
  ['POST /v1/checkout/sessions', sessions.createSession],
  ['GET /v1/checkout/sessions', sessions.listSessions],
  ['GET /v1/checkout/sessions/:id', sessions.retrieveSession],
  ['POST /v1/checkout/sessions/:id', sessions.updateSession],
  ['POST /v1/checkout/sessions/:id/expire', sessions.expireSession],
  ['GET /v1/checkout/sessions/:id/line_items', sessions.listLineItems],
  ['GET /v1/payment_intents', intents.listIntents],
  ['GET /v1/payment_intents/search', intents.searchIntents],
  ['GET /v1/payment_intents/:id', intents.retrieveIntent],
  ['POST /v1/payment_intents/:id', intents.updateIntent],
  ['POST /v1/payment_intents/:id/cancel', intents.cancelIntent],
  ['GET /v1/payment_methods/:id', one('payment_method', 'payment_method')],
  ['GET /v1/charges', charges.listCharges],
  ['GET /v1/charges/search', intents.searchCharges],
  ['GET /v1/charges/:id', one('charge')],
  ['POST /v1/refunds', charges.createRefund],
  ['GET /v1/refunds', charges.listRefunds],
  ['GET /v1/refunds/:id', one('refund', 'refund')],
  ['POST /v1/refunds/:id', charges.updateRefund],
  ['GET /v1/disputes', charges.listDisputes],
  ['GET /v1/disputes/:id', one('dispute', 'dispute')],
  ['POST /v1/disputes/:id', charges.updateDispute],
  ['POST /v1/disputes/:id/close', charges.closeDispute],
  ['GET /v1/balance', balance.retrieveBalance],
  ['GET /v1/balance_transactions', balance.listBalanceTransactions],
  ['GET /v1/balance_transactions/:id', one('balance_transaction')],
  ['GET /v1/payouts', balance.listPayouts],
  ['GET /v1/payouts/:id', one('payout', 'payout')],
  ['GET /v1/application_fees', balance.listApplicationFees],
  ['GET /v1/application_fees/:id', one('application_fee')],
  ['GET /v1/events', listEvents],
  ['GET /v1/events/:id', one('event')],
  ['POST /v1/webhook_endpoints', endpoints.createEndpoint],
  ['GET /v1/webhook_endpoints', endpoints.listEndpoints],
  ['GET /v1/webhook_endpoints/:id', one('webhook_endpoint', 'webhook_endpoint')],
  ['POST /v1/webhook_endpoints/:id', endpoints.updateEndpoint],
  ['DELETE /v1/webhook_endpoints/:id', endpoints.deleteEndpoint],
];

/** @type {Route[]} */
const routes = table.map(([line, handler]) => {
  const [method = '', path = ''] = line.split(' ');
  return { method, pattern: new RegExp(`^${path.replace(/:([a-z]+)/g, '(?<$1>[^/]+)')}$`), handler };
});

/**
 * @param {string} method
 * @param {string} path
 * @returns {{ handler: Handler, params: Record<string, string> }}
 */
export function route(method, path) {
  for (const { method: m, pattern, handler } of routes) {
    const match = m === method ? pattern.exec(path) : null;
    if (match) return { handler, params: { ...match.groups } };
  }
  throw new StripeFailure(
    404,
    {
      type: 'invalid_request_error',
      message: `Unrecognized request URL (${method}: ${path}). Please see https://stripe.com/docs or we can help at https://support.stripe.com/.`,
    },
    false,
  );
}
