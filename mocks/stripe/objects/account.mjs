import { newId } from '../ids.mjs';

/**
 * @typedef {import('stripe').Stripe.Account} Account
 * @typedef {{ type: 'express' | 'standard' | 'custom' | 'none', controller: NonNullable<Account['controller']>, country: string, email: string | null,
 *   business_type: Account['business_type'], name: string | null, url: string | null, capabilities: string[], metadata: Record<string, string> }} Asked
 */

/** What an account lacks before its owner has been through onboarding. */
const due = ['business_profile.mcc', 'external_account', 'tos_acceptance.date', 'tos_acceptance.ip'];

/**
 * @param {import('../types.d.ts').Act} act
 * @param {Asked} asked
 * @returns {Account}
 */
export function newAccount(act, asked) {
  return {
    id: newId('acct', 16),
    object: 'account',
    business_profile: {
      mcc: null,
      minority_owned_business_designation: null,
      name: asked.name,
      specified_commercial_transactions_act_url: null,
      support_address: null,
      support_email: null,
      support_phone: null,
      support_url: null,
      url: asked.url,
    },
    business_type: asked.business_type ?? null,
    capabilities: Object.fromEntries(asked.capabilities.map((c) => [c, 'inactive'])),
    charges_enabled: false,
    controller: asked.controller,
    country: asked.country,
    created: act.now,
    default_currency: 'usd',
    details_submitted: false,
    email: asked.email,
    external_accounts: { object: 'list', data: [], has_more: false, url: '/v1/accounts/external_accounts' },
    future_requirements: requirements([], null),
    metadata: asked.metadata,
    payouts_enabled: false,
    requirements: requirements(due, 'requirements.past_due'),
    settings: settings(asked.name),
    tos_acceptance: { date: null, ip: null, user_agent: null },
    type: asked.type,
  };
}

/**
 * What onboarding changes.
 * @param {Account} account
 * @param {number} now
 * @returns {Partial<Account>}
 */
export const onboarded = (account, now) => ({
  capabilities: Object.fromEntries(Object.keys(account.capabilities ?? {}).map((c) => [c, 'active'])),
  charges_enabled: true,
  details_submitted: true,
  payouts_enabled: true,
  requirements: requirements([], null),
  tos_acceptance: { date: now, ip: null, user_agent: null },
});

/**
 * What happens when Stripe stops an account.
 * @param {Account} account
 * @returns {Partial<Account>}
 */
export const restricted = (account) => ({
  capabilities: Object.fromEntries(Object.keys(account.capabilities ?? {}).map((c) => [c, 'inactive'])),
  charges_enabled: false,
  payouts_enabled: false,
  requirements: requirements(['external_account'], 'requirements.past_due'),
});

/**
 * @param {string[]} fields
 * @param {'requirements.past_due' | null} reason
 * @returns {NonNullable<Account['requirements']> & NonNullable<Account['future_requirements']>}
 */
const requirements = (fields, reason) => ({
  alternatives: [],
  current_deadline: null,
  currently_due: fields,
  disabled_reason: reason,
  errors: [],
  eventually_due: fields,
  past_due: fields,
  pending_verification: [],
});

/**
 * @param {string | null} name
 * @returns {NonNullable<Account['settings']>}
 */
const settings = (name) => ({
  branding: { icon: null, logo: null, primary_color: null, secondary_color: null },
  card_payments: {
    decline_on: { avs_failure: false, cvc_failure: false },
    statement_descriptor_prefix: null,
    statement_descriptor_prefix_kana: null,
    statement_descriptor_prefix_kanji: null,
  },
  dashboard: { display_name: name, timezone: 'Etc/UTC' },
  payments: {
    statement_descriptor: null,
    statement_descriptor_kana: null,
    statement_descriptor_kanji: null,
    statement_descriptor_prefix_kana: null,
    statement_descriptor_prefix_kanji: null,
  },
  payouts: {
    debit_negative_balances: true,
    schedule: { delay_days: 2, interval: 'daily' },
    statement_descriptor: null,
  },
});
