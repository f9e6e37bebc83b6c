import { Catch, HttpException, Logger, type ArgumentsHost, type ExceptionFilter } from '@nestjs/common';
import type { Request, Response } from 'express';
import { InvalidInput } from '@tallypole/shared/arithmetic';
import { problems, type ProblemBody, type ProblemCode } from '@tallypole/shared/problems';
import { Problem } from './problem.ts';
import { isConnectionLost, problemOfSqlState, sqlState } from './sql-state.ts';

const CODE_OF_STATUS: Readonly<Record<number, ProblemCode>> = {
  401: 'not_signed_in',
  403: 'not_allowed',
  404: 'not_found',
  413: 'file_too_large',
  415: 'wrong_file_kind',
  429: 'too_many_tries',
};

/** Turns every error into application/problem+json (RFC 9457). What nobody foresaw is logged whole and answered with a bare id. */
@Catch()
export class ProblemFilter implements ExceptionFilter {
  private readonly logger = new Logger('problem');

  catch(error: unknown, host: ArgumentsHost): void {
    const response = host.switchToHttp().getResponse<Response>();
    const request = host.switchToHttp().getRequest<Request & { id?: string }>();
    const problem = asProblem(error);
    if (problem.status >= 500) this.logger.error({ err: error, requestId: request.id });
    if (response.headersSent) {
      response.end();
      return;
    }
    if (problem.status === 503) response.setHeader('Retry-After', String(problem.details.retryAfterSeconds ?? 2));
    if (problem.status === 429) response.setHeader('Retry-After', String(problem.details.retryAfterSeconds ?? 60));
    response.status(problem.status).type('application/problem+json').send(JSON.stringify(bodyOf(problem, request.id)));
  }
}

/** The problem that an error stands for. */
function asProblem(error: unknown): Problem {
  if (error instanceof Problem) return error;
  if (error instanceof InvalidInput) return Problem.field(`/${error.field.replaceAll('.', '/')}`, sentence(error.rule), 'computation');
  if (error instanceof HttpException) {
    const status = error.getStatus();
    return new Problem(CODE_OF_STATUS[status] ?? (status < 500 ? 'malformed_request' : 'failed'));
  }
  const state = sqlState(error);
  const code = state === undefined ? undefined : problemOfSqlState[state];
  if (code) return new Problem(code);
  if (isConnectionLost(error)) return new Problem('busy');
  if (isBodyError(error)) return new Problem(error.status === 413 ? 'file_too_large' : 'malformed_request');
  return new Problem('failed');
}

function bodyOf(problem: Problem, requestId: string | undefined): ProblemBody {
  const { detail, errors, version } = problem.details;
  return {
    type: `urn:tallypole:problem:${problem.code}`,
    title: problems[problem.code].title,
    status: problem.status,
    code: problem.code,
    ...(detail === undefined ? {} : { detail }),
    ...(errors === undefined ? {} : { errors }),
    ...(version === undefined ? {} : { version }),
    ...(requestId === undefined ? {} : { requestId }),
  };
}

const sentence = (rule: string) => `${rule.charAt(0).toUpperCase()}${rule.slice(1)}.`;

// body-parser's errors carry a status and a type such as entity.parse.failed
function isBodyError(error: unknown): error is { status: number } {
  const { status, type } = error as { status?: unknown; type?: unknown };
  return typeof status === 'number' && status >= 400 && status < 500 && typeof type === 'string';
}
