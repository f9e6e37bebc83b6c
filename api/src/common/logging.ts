import type { LoggerService } from '@nestjs/common';
import { randomUUID } from 'node:crypto';
import { pino, type Logger } from 'pino';
import { pinoHttp } from 'pino-http';

/** SQLSTATE classes whose messages repeat what somebody typed: data exceptions and integrity violations. */
const REPEATS_INPUT = /^2[23]/;

/** An error for the log: no SQL, no parameters, no bodies, since they hold what people typed. */
export function safeError(error: unknown): object {
  const { name, message, code, stack, parent, cause, details } = error as SomeError;
  const state = parent?.code ?? code;
  const repeats = typeof state === 'string' && REPEATS_INPUT.test(state);
  // the stack begins with the message again
  const frames = stack?.split('\n').filter((line) => /^\s+at /.test(line)).join('\n');
  const constraint = parent?.constraint;
  return {
    type: name,
    // a problem's own detail may name what was typed; its code says enough
    ...(repeats || details ? {} : { message }),
    ...(state === undefined ? {} : { state }),
    ...(constraint === undefined ? {} : { constraint }),
    ...(cause === undefined || cause === null ? {} : { cause: (cause as SomeError).code ?? (cause as SomeError).name }),
    stack: frames,
  };
}

interface SomeError {
  name?: string;
  message?: string;
  code?: string;
  stack?: string;
  parent?: { code?: string; constraint?: string };
  cause?: unknown;
  details?: object;
}

export const rootLogger = (level: string): Logger => pino({ level, base: null, serializers: { err: safeError } });

/** One line per request: id, who, method, path without its query, status, milliseconds. */
export const httpLogger = (logger: Logger) =>
  pinoHttp({
    logger,
    genReqId: () => randomUUID(),
    customLogLevel: (_request, response, error) => (error || response.statusCode >= 500 ? 'error' : 'info'),
    // the problem filter tells why, under the same id
    customErrorObject: (_request, _response, _error, { err: _told, ...line }: Record<string, unknown>) => line,
    customProps: (request) => {
      const { user } = request as { user?: { personId: string; sessionId: string } };
      return user ? { person: user.personId, session: user.sessionId } : {};
    },
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
    // what our own parts tell is a line of its own; the framework's chatter is for debugging
    if (isObject(message)) this.logger.info({ ...message, context });
    else this.logger.debug({ context }, String(message));
  }

  warn(message: unknown, context?: string): void {
    if (isObject(message)) this.logger.warn({ ...message, context });
    else this.logger.warn({ context }, String(message));
  }

  error(message: unknown, ...more: unknown[]): void {
    if (isObject(message)) this.logger.error({ ...message, context: more.at(-1) }, 'error');
    else this.logger.error({ context: more.at(-1) }, String(message));
  }
}

const isObject = (message: unknown): message is object => typeof message === 'object' && message !== null;
