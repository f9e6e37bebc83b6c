/** HTTP status of each error code (https://docs.aws.amazon.com/AmazonS3/latest/API/ErrorResponses.html). @type {Record<string, number>} */
const STATUS = {
  AccessDenied: 403,
  EntityTooSmall: 400,
  InternalError: 500,
  InvalidAccessKeyId: 403,
  InvalidArgument: 400,
  InvalidPart: 400,
  InvalidRange: 416,
  MalformedXML: 400,
  MethodNotAllowed: 405,
  NoSuchBucket: 404,
  NoSuchKey: 404,
  NoSuchUpload: 404,
  NotImplemented: 501,
  PreconditionFailed: 412,
  RequestTimeTooSkewed: 403,
  SignatureDoesNotMatch: 403,
  SlowDown: 503,
  XAmzContentSHA256Mismatch: 400,
};

/** An error that the API answers. */
export class Refused extends Error {
  /** @param {string} code */
  constructor(code) {
    super(code);
    this.code = code;
    this.status = STATUS[code] ?? 500;
  }
}

/** @param {import('node:http').ServerResponse} response @param {number} status @param {string} body */
export function xml(response, status, body) {
  if (response.headersSent) response.destroy();
  else response.writeHead(status, { 'Content-Type': 'application/xml' }).end(`<?xml version="1.0" encoding="UTF-8"?>\n${body}`);
}

/** @param {import('node:http').ServerResponse} response @param {Refused} refused */
export const refuse = (response, { code, status }) => xml(response, status, `<Error><Code>${code}</Code><Message>${code}</Message></Error>`);
