import { moveAccount } from '../control/money.mjs';
import { parseFields } from '../forms.mjs';
import { redirect } from '../http.mjs';
import { html } from './html.mjs';
import { sendPage, sendProblem } from './layout.mjs';

/**
 * @typedef {import('../types.d.ts').World} World
 * @typedef {import('node:http').ServerResponse} ServerResponse
 */

/**
 * GET /onboard/:link. A link works once and for a few minutes; after that the platform has to make another.
 * @param {World} world
 * @param {ServerResponse} response
 * @param {string} id
 */
export function showOnboarding(world, response, id) {
  const { link, account } = find(world, id);
  if (!link || !account) return sendProblem(response, 404, 'There is no such link.');
  if (spent(world, link)) return redirect(response, link.refresh_url);
  sendPage(response, 200, {
    title: 'Set up payments',
    leadsTo: [link.return_url, link.refresh_url],
    body: html`
<h1>Set up payments for ${account.business_profile?.name ?? account.email ?? account.id}</h1>
<p>The real service asks for the business, its owners and a bank account here. The stand-in asks for nothing.</p>
<dl><dt>Account</dt><dd>${account.id}</dd><dt>Can take payments</dt><dd>${account.charges_enabled ? 'yes' : 'not yet'}</dd></dl>
<form method="post" action="/onboard/${id}"><div class="row">
<button name="step" value="finish">Finish: the account can take payments</button>
<button class="plain" name="step" value="leave">Leave without finishing</button></div></form>`,
  });
}

/**
 * POST /onboard/:link
 * @param {World} world
 * @param {ServerResponse} response
 * @param {string} id
 * @param {string} body
 */
export function submitOnboarding(world, response, id, body) {
  const { link, account } = find(world, id);
  if (!link || !account) return sendProblem(response, 404, 'There is no such link.');
  if (spent(world, link)) return redirect(response, link.refresh_url);
  world.act(account.id, ({ tx }) => tx.change('link', id, { used: true }));
  if (parseFields(body)['step'] === 'finish' && !account.charges_enabled) moveAccount(world, account.id, 'onboard');
  redirect(response, link.return_url);
}

/**
 * @param {World} world
 * @param {string} id
 */
const find = (world, id) =>
  world.store.transaction((tx) => {
    const link = tx.find('link', id);
    return { link, account: link ? tx.find('account', link.account) : undefined };
  });

/**
 * @param {World} world
 * @param {import('../types.d.ts').Link} link
 */
const spent = (world, link) => link.used || link.expires_at * 1000 <= world.nowMs();
