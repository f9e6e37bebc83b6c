import type { Request, Response } from 'express';
import multer from 'multer';
import { MOST_SCHEDULE_BYTES, PreviewSchedule } from '@tallypole/shared/schemas/schedule-of-values';
import { parsed } from '../common/parsed.ts';
import { Problem } from '../common/problem.ts';
import { safeFileName } from '../files/file-name.ts';
import { asUploadProblem } from '../files/upload-problem.ts';
import type { ScheduleFile } from './schedule-reader.ts';

const receive = multer({
  storage: multer.memoryStorage(),
  limits: { files: 1, fields: 4, parts: 6, fieldSize: 1_000, fieldNameSize: 60, fileSize: MOST_SCHEDULE_BYTES, headerPairs: 30 },
  defParamCharset: 'utf8',
}).single('file');

/** Takes a schedule's file into memory, where its size is bounded; it is read and forgotten. */
export async function receiveSchedule(request: Request, response: Response): Promise<ScheduleFile> {
  await new Promise<void>((done, fail) => {
    void receive(request, response, (error: unknown) => (error ? fail(asUploadProblem(error, MOST_SCHEDULE_BYTES)) : done()));
  });
  const { sheet } = parsed(PreviewSchedule, { ...(request.body as Record<string, unknown> | undefined) });
  const { file } = request;
  if (!file) throw Problem.field('/file', 'Choose a file.', 'missing');
  if (file.size === 0) throw new Problem('unreadable_file', { detail: 'The file is empty.' });
  return { name: safeFileName(file.originalname), content: file.buffer, sheet };
}
