/**
 * An answer that refuses, in the body that Stripe publishes: `{ error: { type, code, message, param, … } }`.
 * `began` says whether work had begun: only then does an idempotency key remember the refusal.
 */
export class StripeFailure extends Error {
  /**
   * @param {number} status
   * @param {{ type: string, code?: string, message: string, param?: string, decline_code?: string, payment_intent?: object }} error
   * @param {boolean} [began]
   */
  constructor(status, error, began = true) {
    super(error.message);
    this.status = status;
    this.error = error;
    this.began = began;
  }

  /** @param {string} requestId */
  body(requestId) {
    const { code } = this.error;
    return {
      error: {
        ...this.error,
        ...(code === undefined ? {} : { doc_url: `https://stripe.com/docs/error-codes/${code.replaceAll('_', '-')}` }),
        request_log_url: `https://dashboard.stripe.com/test/logs/${requestId}`,
      },
    };
  }
}

/**
 * A request that was understood and can't be done.
 * @param {string} message
 * @param {{ code?: string, param?: string, payment_intent?: object }} [more]
 */
export const refused = (message, more = {}) =>
  new StripeFailure(400, { type: 'invalid_request_error', message, ...more });

/**
 * A parameter that can't be right, found before any work began.
 * @param {string} message
 * @param {{ code?: string, param?: string }} [more]
 */
export const invalid = (message, more = {}) =>
  new StripeFailure(400, { type: 'invalid_request_error', message, ...more }, false);

/**
 * @param {string} kind as Stripe names the object
 * @param {string} id
 * @param {string} [param]
 */
export const missing = (kind, id, param = 'id') =>
  new StripeFailure(404, {
    type: 'invalid_request_error',
    code: 'resource_missing',
    message: `No such ${kind}: '${id}'`,
    param,
  });

/** @param {string} message */
export const unauthorized = (message) => new StripeFailure(401, { type: 'invalid_request_error', message }, false);

/**
 * @param {number} status
 * @param {string} message
 */
export const outage = (status, message) => new StripeFailure(status, { type: 'api_error', message });
