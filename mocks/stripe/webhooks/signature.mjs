import { createHmac } from 'node:crypto';

/**
 * The header as published: HMAC-SHA256 over `timestamp.body`.
 * @param {string} body
 * @param {string} secret
 * @param {import('../types.d.ts').Forge} [forge] a header that must be refused
 * @returns {string | undefined}
 */
export function signatureHeader(body, secret, forge) {
  if (forge === 'no_signature') return undefined;
  // The real clock, even when the stand-in's is ahead: the receiver compares with its own.
  const at = Math.floor(Date.now() / 1000) - (forge === 'old_timestamp' ? 3600 : 0);
  const key = forge === 'bad_signature' ? `${secret} of somebody else` : secret;
  return `t=${at},v1=${createHmac('sha256', key).update(`${at}.${body}`).digest('hex')}`;
}
