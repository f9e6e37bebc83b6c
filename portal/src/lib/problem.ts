import { problems, type FieldProblem, type ProblemBody, type ProblemCode } from '@tallypole/shared/problems';

/** An error that the server explained, or one of this side: a network that didn't answer, a page older than the server. */
export class Problem extends Error {
  override readonly name = 'Problem';

  constructor(
    readonly code: ProblemCode | 'offline' | 'outdated',
    message: string,
    readonly status: number,
    readonly errors: readonly FieldProblem[] = [],
    readonly requestId?: string,
  ) {
    super(message);
  }
}

const OFFLINE = 'No answer came. Check the connection; what you typed is kept.';

const OUTDATED = 'There is a newer version of this page, so nothing was sent. Load it again and look once more; what you typed is kept.';

export const offline = (): Problem => new Problem('offline', OFFLINE, 0);
export const outdated = (): Problem => new Problem('outdated', OUTDATED, 409);

/** Reads an error's body; anything that isn't one of ours becomes `failed`. */
export async function problemOf(response: Response): Promise<Problem> {
  const body: unknown = await response.json().catch(() => null);
  if (!isProblem(body)) return new Problem('failed', problems.failed.title, response.status);
  return new Problem(body.code, body.detail ?? body.title, body.status, body.errors ?? [], body.requestId);
}

function isProblem(body: unknown): body is ProblemBody {
  return typeof body === 'object' && body !== null && 'code' in body && typeof body.code === 'string' && body.code in problems;
}

export const isProblemWith = (error: unknown, code: Problem['code']): error is Problem => error instanceof Problem && error.code === code;
