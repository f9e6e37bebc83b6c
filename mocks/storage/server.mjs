// A stand-in for an S3-compatible store: one bucket, the calls that an SDK makes for single objects, signatures checked, outages on demand.
import { createServer } from 'node:http';
import { Refused, refuse } from './answers.mjs';
import { operationOf } from './operations.mjs';
import { Shelf } from './shelf.mjs';
import { refusal } from './signature.mjs';

/**
 * `error` and `slow_down` answer so, `drop` breaks the connection before anything is done, `drop_after` after it, `hang` never answers,
 * `cut` sends half of what is read.
 * @typedef {{ mode: 'error' | 'slow_down' | 'drop' | 'drop_after' | 'hang' | 'cut', method?: string, times: number }} Fault
 * @typedef {{ port: number, dataDir: string, bucket: string, accessKeyId: string, secretAccessKey: string }} Options
 */

/** @param {Options} options */
export async function start({ port, dataDir, bucket, ...keys }) {
  const shelf = new Shelf(dataDir);
  /** @type {Fault[]} */
  const faults = [];
  const server = createServer((request, response) => {
    response.on('error', () => {});
    const serve = request.url?.startsWith('/_control') ? control(request, response, { shelf, faults }) : answer({ request, response, shelf, faults, bucket, keys });
    serve.catch((/** @type {unknown} */ error) => refuse(response, error instanceof Refused ? error : new Refused('InternalError')));
  });
  await new Promise((done, fail) => {
    server.once('error', fail);
    server.listen(port, '127.0.0.1', () => done(undefined));
  });
  const address = server.address();
  return {
    url: `http://127.0.0.1:${typeof address === 'object' && address ? address.port : port}`,
    close: () =>
      new Promise((done) => {
        server.close(() => done(undefined));
        server.closeAllConnections();
      }),
  };
}

/**
 * @param {{ request: import('node:http').IncomingMessage, response: import('node:http').ServerResponse, shelf: Shelf, faults: Fault[], bucket: string,
 *   keys: import('./signature.mjs').Keys }} call
 */
async function answer({ request, response, shelf, faults, bucket, keys }) {
  const fault = takeFault(faults, request.method ?? '');
  if (fault?.mode === 'hang') return;
  if (fault?.mode === 'drop') {
    request.destroy();
    return;
  }
  if (fault?.mode === 'error') throw new Refused('InternalError');
  if (fault?.mode === 'slow_down') throw new Refused('SlowDown');
  const { method = '', url = '', headers } = request;
  const refused = refusal({ method, url, headers }, keys, Date.now());
  if (refused) throw new Refused(refused);
  // a body in signed chunks would have to be taken apart: better refused than stored with its framing inside
  if (String(headers['x-amz-content-sha256']).startsWith('STREAMING-') || headers['content-encoding'] === 'aws-chunked') throw new Refused('NotImplemented');
  const [, named = '', key = ''] = /^\/([^/]+)\/?(.*)$/.exec(decodeURIComponent(url.split('?')[0] ?? '')) ?? [];
  if (named !== bucket) throw new Refused('NoSuchBucket');
  const call = { request, response, shelf, key, query: new URLSearchParams(url.split('?')[1] ?? ''), cut: fault?.mode === 'cut' };
  const operation = key === '' ? undefined : operationOf(call);
  if (key === '' && (method === 'HEAD' || method === 'GET') && !url.includes('?')) {
    response.writeHead(200).end();
    return;
  }
  if (!operation) throw new Refused('MethodNotAllowed');
  if (fault?.mode === 'drop_after') response.writeHead = () => response.destroy();
  await operation(call);
}

/** @param {Fault[]} faults @param {string} method */
function takeFault(faults, method) {
  const at = faults.findIndex((fault) => fault.method === undefined || fault.method === method);
  const fault = faults[at];
  if (!fault) return undefined;
  fault.times -= 1;
  if (fault.times <= 0) faults.splice(at, 1);
  return fault;
}

/**
 * GET /_control tells what is kept; POST /_control/faults asks for an outage; DELETE /_control/faults ends all.
 * @param {import('node:http').IncomingMessage} request
 * @param {import('node:http').ServerResponse} response
 * @param {{ shelf: Shelf, faults: Fault[] }} state
 */
async function control(request, response, { shelf, faults }) {
  if (request.method === 'POST') {
    let text = '';
    for await (const part of request) text += part;
    faults.push({ times: 1, ...JSON.parse(text) });
  }
  if (request.method === 'DELETE') faults.length = 0;
  response.writeHead(200, { 'Content-Type': 'application/json' });
  response.end(JSON.stringify({ objects: shelf.all(), uploads: shelf.openUploads(), faults }));
}
