/** A failure that the person at the keyboard can mend: shown as one line, without a stack. */
export class Failure extends Error {}

/**
 * Ends the process with one clear line for a Failure, with the stack for anything unforeseen.
 * @param {unknown} error
 */
export function explain(error) {
  if (error instanceof Failure) return error.message;
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}

/**
 * @param {unknown} error
 * @returns {string | undefined} the code of a system error, such as ENOENT
 */
export const codeOf = (error) => /** @type {{ code?: string } | null} */ (error)?.code;
