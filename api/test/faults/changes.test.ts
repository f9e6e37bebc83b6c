import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { randomUUID } from 'node:crypto';
import path from 'node:path';
import type { Change } from '@tallypole/shared/schemas/changes';
import { changeAt, issueChange, signature, signChange, startChange } from '../support/change-builders.ts';
import { lentJob, made, type LentJob } from '../support/draw-builders.ts';
import { House, until } from '../support/house.ts';
import type { ChildProcess } from 'node:child_process';

const preload = path.join(import.meta.dirname, 'kill-at-commit.mjs');

describe('kill -9 around a signature', () => {
  let house: House;
  let url: string;
  let worker: ChildProcess;

  beforeAll(async () => {
    house = await House.open();
    worker = await house.worker();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());

  const contract = async (lent: LentJob) => (await house.sql<{ cents: number; lines: number }>('select changes_approved_cents::int as cents, (select count(*)::int from schedule_line s where s.job_id = j.id and s.change_id is not null) as lines from job j where id = $1', [lent.job.id]))[0];

  it.each(['before', 'after'] as const)('moves the contract once when the server dies %s the commit of the last signature', async (when) => {
    const lent = await lentJob(house, url);
    const seen = await issueChange(lent, await startChange(lent));
    made(await signChange(lent, lent.ann, seen));
    const dying = await house.web({ preload, env: { KILL_OPERATION: 'change.sign', KILL_WHEN: when } });
    const body = signature(seen, 'Ben Moss');
    const key = randomUUID();
    await expect(lent.ben.at(dying.url).post(changeAt(lent, seen.id, 'sign'), body, key)).rejects.toThrow();
    expect(await contract(lent)).toEqual(when === 'before' ? { cents: 0, lines: 0 } : { cents: 95_137, lines: 3 });
    expect(made<Change>(await lent.ben.post(changeAt(lent, seen.id, 'sign'), body, key)).state).toBe('approved');
    expect(await contract(lent)).toEqual({ cents: 95_137, lines: 3 });
    await house.mail.wait(lent.ben.email, /is signed/);
  });

  it('makes the paper once another worker lives, when the first one was killed', async () => {
    const lent = await lentJob(house, url);
    await house.kill(worker);
    const change = await startChange(lent);
    made(await lent.principal.post(changeAt(lent, change.id, 'issue'), { version: change.version }));
    worker = await house.worker();
    await until(async () => made<Change>(await lent.ann.get(changeAt(lent, change.id))).document !== null, 'the paper');
    expect(await house.sql(`select count(*)::int as n from document where subject_id = $1`, [change.id])).toEqual([{ n: 1 }]);
  });
});
