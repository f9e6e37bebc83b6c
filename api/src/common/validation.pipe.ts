import { StandardSchemaValidationPipe } from '@nestjs/common';
import { Problem } from './problem.ts';

const keyOf = (part: unknown): string => String(typeof part === 'object' && part !== null && 'key' in part ? part.key : part);

/** Parses by schema at the edge; each issue becomes a field's error under its JSON pointer. */
export const validationPipe = () =>
  new StandardSchemaValidationPipe({
    exceptionFactory: (issues) =>
      new Problem('invalid_input', {
        errors: issues.map((issue) => ({ pointer: `/${(issue.path ?? []).map(keyOf).join('/')}`, code: 'invalid', message: issue.message })),
      }),
  });
