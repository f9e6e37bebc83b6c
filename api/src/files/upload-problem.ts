import { MulterError } from 'multer';
import { Problem } from '../common/problem.ts';

const megabytes = (bytes: number): string => `${Math.floor(bytes / 1_000_000)} MB`;

/** A full disk, a quota, a limit on the size of one file. */
const NO_ROOM = new Set(['ENOSPC', 'EDQUOT', 'EFBIG']);

/** What went wrong while a form arrived, as an error that a person may see or as the failure it is. */
export function asUploadProblem(error: unknown, mostBytes: number): Error {
  if (error instanceof MulterError) {
    return error.code === 'LIMIT_FILE_SIZE'
      ? new Problem('file_too_large', { detail: `The file must be smaller than ${megabytes(mostBytes)}.` })
      : new Problem('malformed_request', { detail: 'The upload could not be read. Send one file with its fields.' });
  }
  if (!(error instanceof Error)) return new Error('The upload failed.', { cause: error });
  if (NO_ROOM.has((error as NodeJS.ErrnoException).code ?? '')) return new Problem('no_room', { detail: 'There is no room for files at the moment. Nothing was kept; try again later.' });
  // complaints about a broken form carry no code; errors of the disk do
  return (error as NodeJS.ErrnoException).code === undefined ? new Problem('malformed_request', { detail: 'The upload broke off or could not be read. Try again.' }) : error;
}
