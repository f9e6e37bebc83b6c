import type { NextFunction, Request, Response } from 'express';
import { problems } from '@tallypole/shared/problems';

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses writes that another site could have caused: beside SameSite=Strict cookies the origin must be the public one and the body
 * JSON or a form with files that a page script sent. `exempt` paths (the payment webhook) carry a signature instead.
 */
export function sameOrigin(publicUrl: string, exempt: readonly string[]) {
  const origin = new URL(publicUrl).origin;
  return (request: Request, response: Response, next: NextFunction): void => {
    if (SAFE.has(request.method) || exempt.includes(request.path)) {
      next();
      return;
    }
    const from = request.get('origin');
    const trusted = from === undefined ? request.get('sec-fetch-site') === 'same-origin' : from === origin;
    const kind = request.get('content-type') ?? '';
    if (trusted && /^(application\/json|multipart\/form-data|image\/|application\/(pdf|octet-stream))/.test(kind)) {
      next();
      return;
    }
    const { status, title } = problems.cross_site;
    response.status(status).type('application/problem+json').send(JSON.stringify({ type: 'urn:tallypole:problem:cross_site', title, status, code: 'cross_site' }));
  };
}
