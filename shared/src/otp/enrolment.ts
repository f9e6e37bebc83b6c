import { base32 } from './base32.ts';

/** What an authenticator reads from a picture: whose key it is, and the key. The other figures are those that every authenticator assumes. */
export function enrolmentUri(issuer: string, account: string, secret: Uint8Array): string {
  const label = `${encodeURIComponent(issuer)}:${encodeURIComponent(account)}`;
  return `otpauth://totp/${label}?secret=${base32(secret)}&issuer=${encodeURIComponent(issuer)}&algorithm=SHA1&digits=6&period=30`;
}
