/** HMAC over a message, the key being the caller's: the algorithm is theirs to choose, and every platform brings its own. */
export type Hmac = (message: Uint8Array) => Uint8Array;

const COUNTER_BYTES = 8;
const MAX_UINT32 = 2 ** 32;

/** A code by counter (RFC 4226, section 5.3): `digits` decimal digits out of the HMAC of the counter. */
export function hotp(hmac: Hmac, counter: number, digits = 6): string {
  if (!Number.isSafeInteger(counter) || counter < 0) throw new RangeError('A counter is a whole number from zero up.');
  const message = new Uint8Array(COUNTER_BYTES);
  const view = new DataView(message.buffer);
  view.setUint32(0, Math.floor(counter / MAX_UINT32));
  view.setUint32(4, counter % MAX_UINT32);
  const hash = hmac(message);
  const last = hash[hash.length - 1] ?? 0;
  const truncated = new DataView(hash.buffer, hash.byteOffset, hash.byteLength).getUint32(last & 0x0f) & 0x7fff_ffff;
  return String(truncated % 10 ** digits).padStart(digits, '0');
}
