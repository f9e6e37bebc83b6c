import type { Response } from 'express';
import type { Answered } from './command-runner.ts';

/** Hands out a command's answer and says when it is the stored one. */
export function answer<T>(response: Response, answered: Answered<T>): T {
  if (answered.replayed) response.setHeader('Idempotency-Replayed', 'true');
  return answered.answer;
}
