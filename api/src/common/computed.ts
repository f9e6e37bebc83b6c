import { InvalidInput } from '@tallypole/shared/arithmetic';
import { Problem } from './problem.ts';

/** Runs a computation on what somebody entered; what it refuses becomes an error at the field that it names. */
export function computed<T>(work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (!(error instanceof InvalidInput)) throw error;
    const message = `${error.rule.charAt(0).toUpperCase()}${error.rule.slice(1)}.`;
    throw new Problem('invalid_input', { errors: [{ pointer: `/${error.field.replaceAll('.', '/')}`, code: 'rule', message }] });
  }
}
