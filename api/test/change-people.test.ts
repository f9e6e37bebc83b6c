import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Change, ChangeList } from '@tallypole/shared/schemas/changes';
import { join, principalWithFirm } from './support/builders.ts';
import { changeAt, issueChange, signature, signChange, startChange } from './support/change-builders.ts';
import { lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House, until } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const ROUNDS = 8;

describe('who sees and who decides a change', () => {
  let house: House;
  let url: string;
  let second: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    ({ url: second } = await house.web());
    firm = await principalWithFirm(house, url);
  });
  afterAll(() => house.close());
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
  });

  const stateOf = async (id: string) => made<Change>(await lent.principal.get(changeAt(lent, id))).state;
  const contract = async () => (await house.sql<{ cents: number; lines: number }>('select changes_approved_cents::int as cents, (select count(*)::int from schedule_line s where s.job_id = j.id and s.change_id is not null) as lines from job j where id = $1', [lent.job.id]))[0];
  const acts = async (id: string) => (await house.sql<{ act: string }>(`select data->>'act' as act from record_entry where job_id = $1 and chain = 'shared' and data->'data'->>'change' = $2 order by seq`, [lent.job.id, id])).map(({ act }) => act);

  it('the site reads what to build and what to leave, in every state, and never a price', async () => {
    const site = new Visitor(house, url, `lou-${v7()}@firm.example`);
    made(await lent.principal.post(`/firms/${lent.firmId}/invitations`, { id: v7(), email: site.email, name: 'Lou Ferris', role: 'site' }));
    await site.signIn();
    const seen = await issueChange(lent, await startChange(lent, { presentation: 'one_sum' }));
    const answer = await site.get(changeAt(lent, seen.id));
    expect((answer.body as Change).scope).toEqual([
      { description: 'Floor joists 2×12, 16 ft', effect: 'add', quantity: '28', unit: 'ea' },
      { description: 'Floor joists 2×10, 16 ft', effect: 'deduct', quantity: '28', unit: 'ea' },
    ]);
    for (const found of [answer, await site.get(`/jobs/${lent.job.id}/changes`), await site.get(`/jobs/${lent.job.id}/house`)]) {
      expect(found.status).toBe(200);
      // the price, its parts, the net cost and the unit costs, as cents and as typed
      expect(found.text).not.toMatch(/95137|78625|16512|40095137|43\.1875|29\.5|"62"/);
    }
    expect((await site.get(`/jobs/${lent.job.id}/documents/${seen.document?.id ?? ''}`)).status).toBe(403);
    for (const act of ['sign', 'decline', 'withdraw', 'issue']) expect([403, 400]).toContain((await site.post(changeAt(lent, seen.id, act), { version: 1, reason: 'Not mine to do.' })).status);
  });

  it('a stranger, another firm\'s principal and a lender of another job find nothing, whatever they ask for', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const { principal } = await principalWithFirm(house, url);
    const elsewhere = await lentJob(house, url);
    for (const who of [principal, elsewhere.principal, elsewhere.lender, elsewhere.ann]) {
      expect((await who.get(changeAt(lent, seen.id))).status).toBe(404);
      expect((await who.get(`/jobs/${elsewhere.job.id}/changes/${seen.id}`)).status).toBe(404);
      expect((await who.get(`/jobs/${lent.job.id}/documents/${seen.document?.id ?? ''}`)).status).toBe(404);
      expect((await who.post(changeAt(lent, seen.id, 'sign'), signature(seen, 'Somebody Else'))).status).toBe(404);
    }
    expect((await lent.lender.post(changeAt(lent, seen.id, 'sign'), signature(seen, 'Lee Banks'))).status).toBe(403);
    expect((await lent.principal.post(changeAt(lent, seen.id, 'sign'), signature(seen, 'Principal'))).status).toBe(403);
  });

  it('one signature is enough where the job says so, and the other homeowner then has nothing to sign', async () => {
    await house.sql(`update job set homeowners_sign = 'one' where id = $1`, [lent.job.id]);
    const seen = await issueChange(lent, await startChange(lent));
    expect(made<Change>(await signChange(lent, lent.ben, seen, 'Ben Moss'))).toMatchObject({ state: 'approved', signersNeeded: 'one' });
    expect((await signChange(lent, lent.ann, seen)).body).toMatchObject({ code: 'wrong_state' });
    expect(await contract()).toEqual({ cents: 95_137, lines: 3 });
    const log = made<ChangeList>(await lent.ann.get(`/jobs/${lent.job.id}/changes`));
    expect(log).toMatchObject({ approvedCents: 95_137, approvedDays: 2, items: [{ number: 1, state: 'approved' }] });
  });

  it('two who sign at once on two servers make one approval, every time', async () => {
    for (let round = 1; round <= ROUNDS; round += 1) {
      const seen = await issueChange(lent, await startChange(lent, { days: 1 }));
      const answers = await Promise.all([signChange(lent, lent.ann, seen), lent.ben.at(second).post(changeAt(lent, seen.id, 'sign'), signature(seen, 'Ben Moss'))]);
      expect(answers.map(({ status }) => status)).toEqual([200, 200]);
      expect(await contract()).toEqual({ cents: 95_137 * round, lines: 3 * round });
      expect((await acts(seen.id)).filter((act) => act === 'change.signed')).toHaveLength(2);
    }
  });

  it('who signs and who declines, withdraws or revises in the same moment: one of them holds, the other is told', async () => {
    for (let round = 0; round < ROUNDS; round += 1) {
      const seen = await issueChange(lent, await startChange(lent));
      made(await signChange(lent, lent.ann, seen));
      const before = await contract();
      const against = [
        () => lent.ann.at(second).post(changeAt(lent, seen.id, 'decline'), { reason: 'On second thought.' }),
        () => lent.principal.at(second).post(changeAt(lent, seen.id, 'withdraw'), { reason: 'Priced by mistake.' }),
      ][round % 2];
      const [sign, other] = await Promise.all([signChange(lent, lent.ben, seen, 'Ben Moss'), against?.()]);
      const state = await stateOf(seen.id);
      expect([sign.status, other?.status].sort()).toEqual([200, 409]);
      expect(state === 'approved').toBe(sign.status === 200);
      expect((await contract())?.cents).toBe((before?.cents ?? 0) + (sign.status === 200 ? 95_137 : 0));
    }
  });

  it('a lapse that comes beside the last signature changes nothing', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    made(await signChange(lent, lent.ann, seen));
    const [sign] = await Promise.all([
      signChange(lent, lent.ben, seen, 'Ben Moss'),
      house.asQueueOwner(`update graphile_worker._private_jobs set run_at = now() where key = 'lapse_change:${seen.id}'`),
    ]);
    expect(sign.status).toBe(200);
    // the task ran: its day isn't over, and the change is signed
    await until(async () => (await house.asQueueOwner(`select key from graphile_worker._private_jobs where key = 'lapse_change:${seen.id}'`)).length === 0, 'the lapse to run');
    expect(await stateOf(seen.id)).toBe('approved');
    expect(await acts(seen.id)).not.toContain('change.lapsed');
  });

  it('an inspector has no business with changes, and a designer reads what is built without its price', async () => {
    const seen = await issueChange(lent, await startChange(lent));
    const inspector = await join(lent.principal, lent.job.id, 'inspector');
    expect((await inspector.get(changeAt(lent, seen.id))).status).toBe(403);
    const designer = await join(lent.principal, lent.job.id, 'designer');
    expect((await designer.get(changeAt(lent, seen.id))).body).toMatchObject({ chargedCents: null, lines: [], scope: [{ quantity: '28' }, { quantity: '28' }] });
  });
});
