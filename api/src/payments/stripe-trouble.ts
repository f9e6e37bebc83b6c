/**
 * How a call ended that didn't succeed. `unclear`: no answer came, the object may exist. `broken`: Stripe answered with an error of its
 * own, which it keeps under the idempotency key. `busy`: try again later. `refused`: what was asked is not possible.
 */
export type TroubleKind = 'unclear' | 'broken' | 'busy' | 'refused';

export class StripeTrouble extends Error {
  override readonly name = 'StripeTrouble';

  constructor(
    readonly kind: TroubleKind,
    cause: { message: string; statusCode?: number | undefined; code?: string | undefined; requestId?: string | undefined },
  ) {
    super(`Stripe: ${kind}${cause.statusCode ? ` (${cause.statusCode})` : ''}: ${cause.message}`, { cause });
  }
}

/** Sorts an error of the SDK by what it means for the attempt. */
export function troubleOf(error: { type?: string; statusCode?: number | undefined; code?: string | undefined }): TroubleKind {
  const { statusCode, code, type } = error;
  if (type === 'StripeConnectionError' || statusCode === undefined) return 'unclear';
  if (statusCode === 429 || statusCode === 401 || (statusCode === 409 && code === 'idempotency_key_in_use')) return 'busy';
  return statusCode >= 500 ? 'broken' : 'refused';
}
