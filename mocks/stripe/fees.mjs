/**
 * Fees in cents, as secondary pages of 2025 and 2026 quote them: a bank debit 0.8 % but at most $5.00, a card 2.9 % and
 * $0.30, a failed debit $4.00, a disputed one $15.00. Rounding to the nearest cent is from memory.
 * Stripe's price list and the account's own contract decide; these only make a ledger meet fees.
 */
export const failedDebitFee = 400;
export const disputeFee = 1500;

/**
 * @param {'us_bank_account' | 'card'} method
 * @param {number} cents
 */
export function processingFee(method, cents) {
  if (method === 'us_bank_account') return Math.min(500, Math.round((cents * 8) / 1000));
  return Math.round((cents * 29) / 1000) + 30;
}
