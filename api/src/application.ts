import type { NestExpressApplication } from '@nestjs/platform-express';
import { SwaggerModule } from '@nestjs/swagger';
import compression from 'compression';
import express, { type NextFunction, type Request, type Response } from 'express';
import helmet from 'helmet';
import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import type { Logger } from 'pino';
import type { Configuration } from './common/configuration.ts';
import { httpLogger } from './common/logging.ts';
import { sameOrigin } from './common/same-origin.ts';
import { openApiDocument } from './openapi.ts';

const CONTENT_POLICY = {
  'default-src': ["'self'"],
  'script-src': ["'self'"],
  'style-src': ["'self'", "'unsafe-inline'"],
  'img-src': ["'self'", 'blob:', 'data:'],
  'connect-src': ["'self'"],
  'worker-src': ["'self'"],
  'object-src': ["'none'"],
  'base-uri': ["'none'"],
  'frame-ancestors': ["'none'"],
  'form-action': ["'self'"],
};
/** Signed by the sender instead of coming from our pages. */
const WEBHOOK_PATH = '/api/payments/webhook';
const YEAR_SECONDS = 31_536_000;

/** Everything between Express and the controllers. */
export function configure(app: NestExpressApplication, configuration: Configuration, logger: Logger): void {
  const https = configuration.PUBLIC_URL.startsWith('https://');
  app.set('trust proxy', 'loopback');
  app.set('query parser', 'simple');
  app.disable('x-powered-by');
  app.use(httpLogger(logger));
  app.use(
    helmet({
      contentSecurityPolicy: { useDefaults: false, directives: CONTENT_POLICY },
      strictTransportSecurity: https ? { maxAge: YEAR_SECONDS, includeSubDomains: true } : false,
      referrerPolicy: { policy: 'no-referrer' },
    }),
  );
  app.use(compression());
  const buildId = buildIdOf(configuration.PORTAL_DIST);
  app.use('/api', (_request: Request, response: Response, next: NextFunction) => {
    response.setHeader('Cache-Control', 'no-store');
    if (buildId) response.setHeader('Build-Id', buildId);
    next();
  });
  app.use(sameOrigin(configuration.PUBLIC_URL, [WEBHOOK_PATH]));
  app.useBodyParser('json', { limit: '1mb', type: ['application/json', 'application/*+json'] });
  app.setGlobalPrefix('api');
  app.enableShutdownHooks();
  if (configuration.NODE_ENV === 'development') SwaggerModule.setup('api/docs', app, () => openApiDocument(app), { jsonDocumentUrl: 'api/openapi.json' });
  if (configuration.PORTAL_DIST) servePortal(app, configuration.PORTAL_DIST);
}

/** The build of the pages that this server was started with: repeated in each answer, so that an older page notices that it is one. */
function buildIdOf(folder: string | undefined): string | undefined {
  const file = folder ? path.join(folder, 'build-id.txt') : undefined;
  return file && existsSync(file) ? readFileSync(file, 'utf8').trim() : undefined;
}

/** The built portal: hashed assets for a year, the page itself never from a cache; unknown paths are the portal's own routes. */
function servePortal(app: NestExpressApplication, folder: string): void {
  const files = express.static(folder, {
    index: false,
    setHeaders: (response: Response, file: string) => response.setHeader('Cache-Control', file.includes(`${path.sep}assets${path.sep}`) ? `public, max-age=${YEAR_SECONDS}, immutable` : 'no-cache'),
  });
  // no file is looked for where the interface is asked
  app.use((request: Request, response: Response, next: NextFunction) => (request.path.startsWith('/api') ? next() : void files(request, response, next)));
  app.use((request: Request, response: Response, next: NextFunction) => {
    if (request.method !== 'GET' || request.path.startsWith('/api') || path.extname(request.path) || !request.accepts('html')) {
      next();
      return;
    }
    response.setHeader('Cache-Control', 'no-cache');
    response.sendFile('index.html', { root: folder });
  });
}
