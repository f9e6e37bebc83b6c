import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { verifyChain, type PrintedHead } from '@tallypole/shared/record';
import type { RecordPart } from '@tallypole/shared/schemas/record';
import { join, principalWithFirm } from './support/builders.ts';
import { changeAt, changeDraft, issueChange, startChange } from './support/change-builders.ts';
import { approvedDraw, lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House } from './support/house.ts';
import type { Visitor } from './support/visitor.ts';

describe('the record as people read it', () => {
  let house: House;
  let url: string;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    lent = await lentJob(house, url);
    await approvedDraw(lent);
    const change = await issueChange(lent, await startChange(lent));
    // a revision is the firm's own matter until it is sent out
    made(await lent.principal.post(changeAt(lent, change.id, 'revisions'), changeDraft(lent)));
  });
  afterAll(() => house.close());

  const read = async (who: Visitor, query = '') => made<RecordPart>(await who.get(`/jobs/${lent.job.id}/record${query}`));
  const headOf = ({ head }: RecordPart): PrintedHead => ({ ...head, printedIn: 'the head' });

  it('holds, computed anew from what each side was sent; a byte that differs or an entry that lacks is found', async () => {
    const shared = await read(lent.ann);
    expect(shared.entries.length).toBeGreaterThan(15);
    expect(await verifyChain(shared.entries, [headOf(shared)])).toMatchObject({ holds: true, head: shared.head });
    for (const who of [lent.principal, lent.lender]) expect(await read(who)).toEqual(shared);
    const [at, entry] = [7, shared.entries[7]];
    if (!entry) throw new Error('too short');
    const altered = shared.entries.with(at, { ...entry, text: entry.text.replace('"v":1', '"v":2') });
    expect(await verifyChain(altered, [headOf(shared)])).toMatchObject({ holds: false, seq: 8, fault: 'altered' });
    expect(await verifyChain(shared.entries.slice(0, -1), [headOf(shared)])).toMatchObject({ holds: false, fault: 'missing' });
  });

  it('comes in parts, one after the other', async () => {
    const whole = await read(lent.ann);
    const rest = await read(lent.ann, '?after=10');
    expect(rest.entries).toEqual(whole.entries.slice(10));
    expect((await read(lent.ann, '?after=100000')).entries).toEqual([]);
    expect((await lent.ann.get(`/jobs/${lent.job.id}/record?after=-1`)).status).toBe(400);
    expect((await lent.ann.get(`/jobs/${lent.job.id}/record?chain=other`)).status).toBe(400);
  });

  it("keeps the firm's own chain to the firm", async () => {
    expect((await read(lent.principal, '?chain=firm')).entries.length).toBeGreaterThan(0);
    for (const who of [lent.ann, lent.lender]) expect((await who.get(`/jobs/${lent.job.id}/record?chain=firm`)).status).toBe(404);
    const inspector = await join(lent.principal, lent.job.id, 'inspector');
    expect((await inspector.get(`/jobs/${lent.job.id}/record`)).status).toBe(403);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(`/jobs/${lent.job.id}/record`)).status).toBe(404);
  });
});
