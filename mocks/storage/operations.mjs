import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Refused, xml } from './answers.mjs';

/**
 * @typedef {object} Call
 * @property {import('node:http').IncomingMessage} request
 * @property {import('node:http').ServerResponse} response
 * @property {string} key
 * @property {URLSearchParams} query
 * @property {import('./shelf.mjs').Shelf} shelf
 * @property {boolean} cut breaks the body of an answer off half way
 */

const LEAST_PART = 5 * 1024 * 1024;
const MOST_DESCRIPTION = 1024 * 1024;

/** What the API does with one object, by method and sub-resource. @param {Call} call */
export function operationOf({ request, query }) {
  const upload = query.has('uploadId');
  if (request.method === 'GET' || request.method === 'HEAD') return readObject;
  if (request.method === 'PUT') return upload ? putPart : putObject;
  if (request.method === 'DELETE') return upload ? abortUpload : deleteObject;
  if (request.method === 'POST') return query.has('uploads') ? createUpload : upload ? completeUpload : undefined;
  return undefined;
}

/** @param {Call} call */
async function putObject(call) {
  const { shelf, key, response } = call;
  refuseExisting(call);
  const arrived = await arriving(call);
  try {
    refuseExisting(call); // somebody else may have been quicker
  } catch (error) {
    shelf.forget(arrived);
    throw error;
  }
  const { etag } = shelf.keep(key, arrived, typeOf(call));
  response.writeHead(200, { ETag: etag }).end();
}

/** @param {Call} call */
async function readObject({ shelf, key, request, response, cut }) {
  const stored = shelf.find(key);
  if (!stored) throw new Refused('NoSuchKey');
  const range = rangeOf(request.headers.range, stored.bytes);
  const length = range ? range.end - range.start + 1 : stored.bytes;
  response.writeHead(range ? 206 : 200, {
    'Accept-Ranges': 'bytes',
    'Content-Length': length,
    'Content-Type': stored.type,
    ETag: stored.etag,
    'Last-Modified': stored.modified,
    ...(range ? { 'Content-Range': `bytes ${range.start}-${range.end}/${stored.bytes}` } : {}),
  });
  if (request.method === 'HEAD') {
    response.end();
    return;
  }
  const content = shelf.read(key, cut ? { start: 0, end: Math.floor(length / 2) } : range);
  await pipeline(content, response, { end: !cut }).catch(() => response.destroy());
  if (cut) response.destroy();
}

/** @param {Call} call */
function deleteObject({ shelf, key, response }) {
  shelf.remove(key);
  response.writeHead(204).end();
}

/** @param {Call} call */
function createUpload(call) {
  const id = call.shelf.openUpload(call.key, typeOf(call));
  xml(call.response, 200, `<InitiateMultipartUploadResult><UploadId>${id}</UploadId></InitiateMultipartUploadResult>`);
}

/** @param {Call} call */
async function putPart(call) {
  const { shelf, response, query } = call;
  const { id } = uploadOf(call);
  const number = Number(query.get('partNumber'));
  if (!Number.isInteger(number) || number < 1 || number > 10_000) throw new Refused('InvalidArgument');
  const arrived = await arriving(call);
  try {
    uploadOf(call); // it may have been given up meanwhile
  } catch (error) {
    shelf.forget(arrived);
    throw error;
  }
  shelf.keepPart(id, number, arrived);
  response.writeHead(200, { ETag: `"${arrived.md5}"` }).end();
}

/** @param {Call} call */
async function completeUpload(call) {
  const { shelf, key, response } = call;
  const { id, type } = uploadOf(call);
  refuseExisting(call);
  const parts = (await description(call)).map(({ number, etag }) => {
    const part = shelf.part(id, number);
    if (!part || part.md5 !== etag) throw new Refused('InvalidPart');
    return part;
  });
  if (parts.length === 0) throw new Refused('MalformedXML');
  if (parts.slice(0, -1).some(({ bytes }) => bytes < LEAST_PART)) throw new Refused('EntityTooSmall');
  const whole = await shelf.arrive(Readable.from(contentOf(parts)));
  const md5s = createHash('md5');
  for (const { md5 } of parts) md5s.update(Buffer.from(md5, 'hex'));
  const { etag } = shelf.keep(key, whole, type, `${md5s.digest('hex')}-${parts.length}`);
  shelf.closeUpload(id);
  xml(response, 200, `<CompleteMultipartUploadResult><ETag>${etag.replaceAll('"', '&quot;')}</ETag></CompleteMultipartUploadResult>`);
}

/** @param {Call} call */
function abortUpload(call) {
  call.shelf.closeUpload(uploadOf(call).id);
  call.response.writeHead(204).end();
}

/** @param {{ file: string }[]} parts */
async function* contentOf(parts) {
  for (const { file } of parts) yield* createReadStream(file);
}

/** @param {Call} call */
function uploadOf({ shelf, key, query }) {
  const id = query.get('uploadId') ?? '';
  const upload = shelf.upload(id, key);
  if (!upload) throw new Refused('NoSuchUpload');
  return { ...upload, id };
}

/** A body that was signed must be the one that came. @param {Call} call */
async function arriving({ shelf, request }) {
  const arrived = await shelf.arrive(request);
  const promised = request.headers['x-amz-content-sha256'];
  const length = request.headers['content-length'];
  if ((promised !== 'UNSIGNED-PAYLOAD' && promised !== arrived.sha256) || (length !== undefined && Number(length) !== arrived.bytes)) {
    shelf.forget(arrived);
    throw new Refused('XAmzContentSHA256Mismatch');
  }
  return arrived;
}

/** @param {Call} call */
function refuseExisting({ request, shelf, key }) {
  if (request.headers['if-none-match'] === '*' && shelf.find(key)) throw new Refused('PreconditionFailed');
}

/** @param {Call} call */
const typeOf = ({ request }) => request.headers['content-type'] ?? 'binary/octet-stream';

/** @param {Call} call */
async function description({ request }) {
  let text = '';
  for await (const part of request) {
    text += part;
    if (text.length > MOST_DESCRIPTION) throw new Refused('MalformedXML');
  }
  return [...text.matchAll(/<Part>(.*?)<\/Part>/gs)].map(([, part = '']) => ({
    number: Number(/<PartNumber>(\d+)<\/PartNumber>/.exec(part)?.[1]),
    etag: /<ETag>(?:"|&quot;)?([0-9a-f]{32})(?:"|&quot;)?<\/ETag>/.exec(part)?.[1],
  }));
}

/** @param {string | undefined} header @param {number} bytes */
function rangeOf(header, bytes) {
  const [, from = '', to = ''] = /^bytes=(\d*)-(\d*)$/.exec(header ?? '') ?? [];
  if (from === '' && to === '') return undefined;
  const start = from === '' ? Math.max(0, bytes - Number(to)) : Number(from);
  const end = from === '' || to === '' ? bytes - 1 : Math.min(Number(to), bytes - 1);
  if (start > end) throw new Refused('InvalidRange');
  return { start, end };
}
