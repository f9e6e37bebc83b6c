import { Logger as QueueLogger } from 'graphile-worker';
import type { Logger } from 'pino';

interface Failure {
  failure?: boolean;
  job?: { id: string; task_identifier: string; attempts: number; max_attempts: number };
  error?: unknown;
}

/** The queue's messages into our log. A failed job is told by its task and error alone: the message may quote a mail address or a payload. */
export const queueLogger = (logger: Logger): QueueLogger =>
  new QueueLogger(() => (level, message, meta) => {
    const { failure, job, error } = (meta ?? {}) as Failure;
    if (failure && job) {
      const { id, task_identifier: task, attempts, max_attempts: most } = job;
      // the last try is the one that somebody has to look at
      logger[attempts >= most ? 'error' : 'warn']({ event: 'job failed', job: id, task, attempt: attempts, of: most, err: unnamed(error) });
    } else if ((level as string) === 'error') logger.error({ event: 'queue' }, message);
    else logger.debug({ event: 'queue' }, message);
  });

/** The error without its message. */
function unnamed(error: unknown): object {
  const { name, code, stack, parent, responseCode } = error as { name?: string; code?: string; stack?: string; parent?: object; responseCode?: number };
  return { name, code: code ?? responseCode, stack, parent };
}
