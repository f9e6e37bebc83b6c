import type { z } from 'zod';
import { Problem } from './problem.ts';

/** Parses what did not come through a decorated body, with the same errors by field. */
export function parsed<T extends z.ZodType>(schema: T, value: unknown): z.infer<T> {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  throw new Problem('invalid_input', { errors: result.error.issues.map((issue) => ({ pointer: `/${issue.path.map(String).join('/')}`, code: 'invalid', message: issue.message })) });
}
