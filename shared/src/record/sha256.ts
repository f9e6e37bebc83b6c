/** What Node (20 and later) and browsers (on https and on localhost) both have, as far as it is used here. */
interface Platform {
  crypto?: { subtle?: { digest(algorithm: 'SHA-256', data: Uint8Array): Promise<ArrayBuffer> } };
  TextEncoder: new () => { encode(text: string): Uint8Array };
}

const platform = globalThis as unknown as Platform;

/**
 * SHA-256 (FIPS 180-4) of a text's UTF-8 bytes, 64 hex digits. By Web Crypto: every platform brings its own implementation, so the
 * product needs none and no package. Throws an Error where a page is neither on https nor on localhost, which has no Web Crypto.
 */
export async function sha256(text: string): Promise<string> {
  const subtle = platform.crypto?.subtle;
  if (!subtle) throw new Error('Hashes can be checked on https or localhost only: this page has no Web Crypto.');
  const digest = await subtle.digest('SHA-256', new platform.TextEncoder().encode(text));
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, '0')).join('');
}
