/**
 * Why a bank gives a debit back: the return codes of secondary tables of the ACH rules, what Stripe calls them when the
 * debit fails, and the reason of the dispute when it comes back after it had settled. Stripe's names are from memory.
 */
const byReturnCode = {
  R01: {
    code: 'insufficient_funds',
    reason: 'insufficient_funds',
    message: "The customer's account has insufficient funds to cover this payment.",
  },
  R02: {
    code: 'account_closed',
    reason: 'incorrect_account_details',
    message: "The customer's bank account has been closed.",
  },
  R03: {
    code: 'no_account',
    reason: 'incorrect_account_details',
    message: "The customer's bank account could not be located.",
  },
  R10: {
    code: 'debit_not_authorized',
    reason: 'debit_not_authorized',
    message: 'The customer has notified their bank that this payment was unauthorized.',
  },
  R16: {
    code: 'bank_account_restricted',
    reason: 'bank_cannot_process',
    message: "The customer's bank account can't be debited.",
  },
};

/** @typedef {keyof typeof byReturnCode} ReturnCode */

export const returnCodes = /** @type {ReturnCode[]} */ (Object.keys(byReturnCode));

/**
 * @param {string | undefined} code a return code or Stripe's own name of the failure; insufficient funds when unsaid
 */
export function bankReason(code = 'R01') {
  const found = Object.entries(byReturnCode).find(([r, { code: name }]) => r === code || name === code);
  return found?.[1];
}
