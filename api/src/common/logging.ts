import type { LoggerService } from '@nestjs/common';
import { randomUUID } from 'node:crypto';
import { pino, type Logger } from 'pino';
import { pinoHttp } from 'pino-http';

/** An error for the log: no SQL, no parameters, no bodies, since they hold what people typed. */
function safeError(error: unknown) {
  const { name, message, stack, parent } = error as { name?: string; message?: string; stack?: string; parent?: { code?: string } };
  return { type: name, message, state: parent?.code, stack };
}

export const rootLogger = (level: string): Logger => pino({ level, base: null, serializers: { err: safeError } });

/** One line per request: id, method, path without its query, status, milliseconds. */
export const httpLogger = (logger: Logger) =>
  pinoHttp({
    logger,
    genReqId: () => randomUUID(),
    customLogLevel: (_request, response, error) => (error || response.statusCode >= 500 ? 'error' : 'info'),
    serializers: {
      req: (request: { id: string; method: string; url: string }) => ({ id: request.id, method: request.method, path: request.url.split('?')[0] }),
      res: (response: { statusCode: number }) => ({ status: response.statusCode }),
      err: safeError,
    },
  });

/** Nest's own messages into the same log. */
export class PinoLogger implements LoggerService {
  constructor(private readonly logger: Logger) {}

  log(message: unknown, context?: string): void {
    this.logger.debug({ context }, String(message));
  }

  warn(message: unknown, context?: string): void {
    this.logger.warn({ context }, String(message));
  }

  error(message: unknown, ...more: unknown[]): void {
    if (typeof message === 'object' && message !== null) this.logger.error({ ...message, context: more.at(-1) }, 'error');
    else this.logger.error({ context: more.at(-1) }, String(message));
  }
}
