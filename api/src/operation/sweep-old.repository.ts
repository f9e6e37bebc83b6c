import type { Logger } from '@nestjs/common';
import type { UnitOfWork } from '../common/unit-of-work.ts';

const MOST_AT_ONCE = 5_000;

/** Worker, daily: what is kept for a time only goes when its time is over (app.sweep holds the periods). */
export async function sweepOld(work: UnitOfWork, logger: Logger): Promise<void> {
  const total = new Map<string, number>();
  for (let more = true; more; ) {
    const swept = await work.write(undefined, (tx) => tx.rows<{ what: string; swept: number }>('select what, swept from app.sweep(now(), $1)', [MOST_AT_ONCE]));
    for (const row of swept) total.set(row.what, (total.get(row.what) ?? 0) + row.swept);
    more = swept.some((row) => row.swept === MOST_AT_ONCE);
  }
  logger.log({ swept: Object.fromEntries(total) });
}
