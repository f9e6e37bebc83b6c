import { problems, type FieldProblem, type ProblemCode } from '@tallypole/shared/problems';

export interface ProblemDetails {
  detail?: string;
  errors?: FieldProblem[];
  version?: number;
  retryAfterSeconds?: number;
}

/** An error that a person may see; everything else becomes `failed`. */
export class Problem extends Error {
  override readonly name = 'Problem';
  readonly status: number;

  constructor(
    readonly code: ProblemCode,
    readonly details: ProblemDetails = {},
  ) {
    super(details.detail ?? problems[code].title);
    this.status = problems[code].status;
  }

  /** One field's error under the general "look at the form again". */
  static field(pointer: string, message: string, code = 'invalid'): Problem {
    return new Problem('invalid_input', { errors: [{ pointer, code, message }] });
  }
}
