import { emit } from '../events.mjs';
import { refused, StripeFailure } from '../errors.mjs';
import { newId, randomText } from '../ids.mjs';
import { listPage, within } from '../lists.mjs';
import { newAccount } from '../objects/account.mjs';
import { address, email, hash, metadata, oneOf, paging, range, readParams, required, text, yesNo } from '../params.mjs';
import { merged } from './merge.mjs';

/** @typedef {import('../router.mjs').Call} Call */

const linkSeconds = 300; // from memory

const capability = hash({ requested: yesNo() });
const capabilities = hash({
  card_payments: capability,
  transfers: capability,
  us_bank_account_ach_payments: capability,
});
const profile = hash({
  name: text(),
  url: text(),
  mcc: text(4),
  product_description: text(),
  support_email: email(),
  support_phone: text(),
  support_url: text(),
});
const controller = hash({
  fees: hash({ payer: oneOf('account', 'application') }),
  losses: hash({ payments: oneOf('application', 'stripe') }),
  requirement_collection: oneOf('application', 'stripe'),
  stripe_dashboard: hash({ type: oneOf('express', 'full', 'none') }),
});
const businessType = oneOf('company', 'government_entity', 'individual', 'non_profit');

/** @param {Call} call */
export function createAccount({ act, form }) {
  const asked = readParams(
    {
      type: oneOf('custom', 'express', 'standard'),
      controller,
      country: text(2),
      email: email(),
      business_type: businessType,
      business_profile: profile,
      capabilities,
      default_currency: oneOf('usd'),
      metadata: metadata(),
    },
    form,
  );
  if (asked.type && asked.controller)
    throw refused('You may not provide the `type` parameter and `controller` parameters simultaneously.', {
      param: 'type',
    });
  const dashboard =
    asked.controller?.stripe_dashboard?.type ??
    (asked.type === 'standard' ? 'full' : asked.type === 'custom' ? 'none' : 'express');
  const standard = dashboard === 'full';
  const account = newAccount(act, {
    type: asked.type ?? (asked.controller ? 'none' : 'standard'),
    controller: {
      type: 'application',
      is_controller: true,
      fees: { payer: asked.controller?.fees?.payer ?? (standard ? 'account' : 'application') },
      losses: { payments: asked.controller?.losses?.payments ?? (standard ? 'stripe' : 'application') },
      requirement_collection:
        asked.controller?.requirement_collection ?? (dashboard === 'none' ? 'application' : 'stripe'),
      stripe_dashboard: { type: dashboard },
    },
    country: asked.country ?? 'US',
    email: asked.email ?? null,
    business_type: asked.business_type ?? null,
    name: asked.business_profile?.name ?? null,
    url: asked.business_profile?.url ?? null,
    capabilities: Object.entries(asked.capabilities ?? {})
      .filter(([, c]) => c?.requested)
      .map(([name]) => name),
    metadata: asked.metadata ?? {},
  });
  return act.tx.put('account', act.account, account);
}

/** @param {Call} call */
export function retrieveAccount({ act, params, form }) {
  readParams({}, form);
  return reachable(act, params['id'] ?? act.account);
}

/** @param {Call} call */
export function updateAccount({ act, params, form }) {
  const asked = readParams(
    { email: email(), business_type: businessType, business_profile: profile, capabilities, metadata: metadata() },
    form,
  );
  const before = reachable(act, params['id'] ?? act.account);
  const added = Object.entries(asked.capabilities ?? {})
    .filter(([, c]) => c?.requested)
    .map(([name]) => name);
  const after = act.tx.change('account', before.id, {
    ...(asked.email === undefined ? {} : { email: asked.email }),
    ...(asked.business_type === undefined ? {} : { business_type: asked.business_type }),
    ...(asked.business_profile && before.business_profile
      ? { business_profile: { ...before.business_profile, ...withoutUndefined(asked.business_profile) } }
      : {}),
    capabilities: {
      ...Object.fromEntries(added.map((c) => [c, before.charges_enabled ? 'active' : 'inactive'])),
      ...before.capabilities,
    },
    ...(asked.metadata ? { metadata: merged(before.metadata, asked.metadata) } : {}),
  });
  emit({ ...act, account: before.id }, 'account.updated', after);
  return after;
}

/** @param {Call} call */
export function listAccounts({ act, form, path }) {
  const { created, ...page } = readParams({ ...paging, created: range() }, form);
  return listPage(act, 'account', path, page, (a) => within(created, a.created ?? 0));
}

/** @param {Call} call */
export function createAccountLink({ act, form }) {
  const asked = readParams(
    {
      account: required(text(255)),
      type: required(oneOf('account_onboarding', 'account_update')),
      refresh_url: required(address()),
      return_url: required(address()),
      collect: oneOf('currently_due', 'eventually_due'),
      collection_options: hash({
        fields: oneOf('currently_due', 'eventually_due'),
        future_requirements: oneOf('include', 'omit'),
      }),
    },
    form,
  );
  const account = reachable(act, asked.account);
  const link = {
    id: randomText(24),
    account: account.id,
    refresh_url: asked.refresh_url,
    return_url: asked.return_url,
    expires_at: act.now + linkSeconds,
    used: false,
  };
  act.tx.put('link', account.id, link);
  return {
    object: 'account_link',
    created: act.now,
    expires_at: link.expires_at,
    url: `${act.world.url}/onboard/${link.id}`,
  };
}

/** @param {Call} call */
export function createLoginLink({ act, params, form }) {
  readParams({}, form);
  const account = reachable(act, params['id'] ?? '');
  if (account.controller?.stripe_dashboard?.type !== 'express')
    throw refused('Cannot create a login link for an account that is not an Express account');
  return { object: 'login_link', created: act.now, url: `${act.world.url}/?account=${account.id}&link=${newId('ll')}` };
}

/**
 * An account that the key may see: every connected one for the platform, else only itself.
 * @param {import('../types.d.ts').Act} act
 * @param {string} id
 */
function reachable(act, id) {
  const account = act.account === act.world.platform || act.account === id ? act.tx.find('account', id) : undefined;
  if (!account) {
    throw new StripeFailure(403, {
      type: 'invalid_request_error',
      code: 'account_invalid',
      message: `The provided key does not have access to account '${id}' (or that account does not exist). Application access may have been revoked.`,
    });
  }
  return account;
}

/**
 * @template {object} T
 * @param {T} value
 * @returns {{ [K in keyof T]?: Exclude<T[K], undefined> }}
 */
const withoutUndefined = (value) =>
  /** @type {{ [K in keyof T]?: Exclude<T[K], undefined> }} */ (
    Object.fromEntries(Object.entries(value).filter(([, v]) => v !== undefined))
  );
