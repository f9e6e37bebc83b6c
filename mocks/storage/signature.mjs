import { createHash, createHmac, timingSafeEqual } from 'node:crypto';

/**
 * AWS Signature Version 4 in the Authorization header, as the receiver computes it
 * (https://docs.aws.amazon.com/AmazonS3/latest/API/sig-v4-header-based-auth.html).
 * @typedef {{ method: string, url: string, headers: Record<string, string | string[] | undefined> }} Signed
 * @typedef {{ accessKeyId: string, secretAccessKey: string }} Keys
 */

const FORM = /^AWS4-HMAC-SHA256 Credential=([^/,\s]+)\/(\d{8})\/([^/,\s]+)\/s3\/aws4_request,\s*SignedHeaders=([a-z0-9;-]+),\s*Signature=([0-9a-f]{64})$/;
const MOST_SKEW_MS = 15 * 60_000;

const sha256 = (/** @type {string} */ text) => createHash('sha256').update(text).digest('hex');
const hmac = (/** @type {string | Buffer} */ key, /** @type {string} */ text) => createHmac('sha256', key).update(text).digest();
/** RFC 3986: everything but unreserved characters. */
const encoded = (/** @type {string} */ text) => encodeURIComponent(text).replace(/[!'()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);

/**
 * What a signature must be, from what is signed.
 * @param {Signed} request
 * @param {{ names: string[], date: string, region: string, secretAccessKey: string }} how
 */
export function signatureOf(request, { names, date, region, secretAccessKey }) {
  const [path = '', query = ''] = request.url.split('?');
  const canonical = [
    request.method,
    path.split('/').map((part) => encoded(decodeURIComponent(part))).join('/'),
    [...new URLSearchParams(query)].map(([name, value]) => `${encoded(name)}=${encoded(value)}`).sort().join('&'),
    ...names.map((name) => `${name}:${[request.headers[name]].flat().join(',').trim().replace(/ +/g, ' ')}`),
    '',
    names.join(';'),
    request.headers['x-amz-content-sha256'],
  ].join('\n');
  const scope = `${date}/${region}/s3/aws4_request`;
  const toSign = ['AWS4-HMAC-SHA256', request.headers['x-amz-date'], scope, sha256(canonical)].join('\n');
  const key = [date, region, 's3', 'aws4_request'].reduce((/** @type {string | Buffer} */ before, text) => hmac(before, text), `AWS4${secretAccessKey}`);
  return createHmac('sha256', key).update(toSign).digest('hex');
}

/**
 * The code of what is wrong with a request's signature, if anything.
 * @param {Signed} request
 * @param {Keys} keys
 * @param {number} now
 * @returns {string | undefined}
 */
export function refusal(request, keys, now) {
  const [, accessKeyId, date = '', region = '', signed = '', signature = ''] = FORM.exec(String(request.headers['authorization'] ?? '')) ?? [];
  if (!accessKeyId) return 'AccessDenied';
  if (accessKeyId !== keys.accessKeyId) return 'InvalidAccessKeyId';
  const names = signed.split(';');
  // what decides about the request must be under the signature
  const needed = ['host', ...Object.keys(request.headers).filter((name) => name.startsWith('x-amz-'))];
  if (!request.headers['x-amz-content-sha256'] || needed.some((name) => !names.includes(name))) return 'AccessDenied';
  const at = Date.parse(String(request.headers['x-amz-date']).replace(/^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/, '$1-$2-$3T$4:$5:$6Z'));
  if (!(Math.abs(now - at) <= MOST_SKEW_MS)) return 'RequestTimeTooSkewed';
  const wanted = signatureOf(request, { names, date, region, secretAccessKey: keys.secretAccessKey });
  return timingSafeEqual(Buffer.from(wanted), Buffer.from(signature)) ? undefined : 'SignatureDoesNotMatch';
}
