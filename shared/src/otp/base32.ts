const ALPHABET = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567';
const BITS = 5;

/** Bytes as people type them into an authenticator (RFC 4648, section 6), without padding. */
export function base32(bytes: Uint8Array): string {
  let text = '';
  let held = 0;
  let bits = 0;
  for (const byte of bytes) {
    held = (held << 8) | byte;
    bits += 8;
    while (bits >= BITS) {
      bits -= BITS;
      text += ALPHABET[(held >> bits) & 31] ?? '';
      held &= (1 << bits) - 1;
    }
  }
  return bits > 0 ? text + (ALPHABET[(held << (BITS - bits)) & 31] ?? '') : text;
}
