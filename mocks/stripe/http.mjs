/**
 * @typedef {import('node:http').IncomingMessage} IncomingMessage
 * @typedef {import('node:http').ServerResponse} ServerResponse
 */

const largestBody = 1024 * 1024;

/**
 * The whole body as text; undefined when it is larger than a megabyte.
 * @param {IncomingMessage} request
 * @returns {Promise<string | undefined>}
 */
export async function readBody(request) {
  /** @type {Buffer[]} */
  const parts = [];
  let size = 0;
  for await (const part of request) {
    size += /** @type {Buffer} */ (part).length;
    if (size <= largestBody) parts.push(/** @type {Buffer} */ (part));
  }
  return size > largestBody ? undefined : Buffer.concat(parts).toString('utf8');
}

/**
 * @param {ServerResponse} response
 * @param {number} status
 * @param {string} body
 * @param {Record<string, string>} headers
 */
export function send(response, status, body, headers) {
  if (response.destroyed || response.headersSent) return;
  response.writeHead(status, {
    'Cache-Control': 'no-cache, no-store',
    'Content-Length': Buffer.byteLength(body),
    ...headers,
  });
  response.end(body);
}

/**
 * @param {ServerResponse} response
 * @param {number} status
 * @param {object} body
 * @param {Record<string, string>} [headers]
 */
export const sendJson = (response, status, body, headers = {}) =>
  send(response, status, `${JSON.stringify(body, null, 2)}\n`, { 'Content-Type': 'application/json', ...headers });

/**
 * @param {ServerResponse} response
 * @param {string} location
 */
export const redirect = (response, location) => send(response, 303, '', { Location: location });
