import { Problem } from '../common/problem.ts';

/** The store of files doesn't answer or refuses: a problem of ours, told to people as a moment's, with its cause for the log. */
export class StorageTrouble extends Problem {
  constructor(cause: unknown) {
    super('busy', { detail: 'Files cannot be kept or opened just now. Try again in a moment; nothing was changed.' });
    this.cause = cause;
  }
}
