import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Change } from '@tallypole/shared/schemas/changes';
import { join, principalWithFirm } from './support/builders.ts';
import { attachReview, changeAt, changeDraft, costLine, issueChange, signChange, startChange } from './support/change-builders.ts';
import { approve, lentJob, made, payDeposit, prove, sentDraw, type LentJob } from './support/draw-builders.ts';
import { House } from './support/house.ts';
import { pdf, upload } from './support/uploads.ts';
import type { Visitor } from './support/visitor.ts';

describe('what a change needs before it is sent out', () => {
  let house: House;
  let url: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    firm = await principalWithFirm(house, url);
  });
  afterAll(() => house.close());
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
  });

  const issue = (change: Change) => lent.principal.post(changeAt(lent, change.id, 'issue'), { version: change.version });
  const edit = async (change: Change, more: object) => {
    const { id: _id, ...fields } = changeDraft(lent, { structural: true, ...more });
    return made<Change>(await lent.principal.post(changeAt(lent, change.id), { ...fields, version: change.version }));
  };
  const file = async (who: Visitor, purpose: string) => {
    const id = v7();
    made(await upload(who, `/jobs/${lent.job.id}/files`, { id, purpose }, { name: 'letter.pdf', content: pdf() }));
    return id;
  };
  const reviewOf = (fileId: string, more: object = {}) => ({ id: v7(), kind: 'designer_review', fileId, reviewerName: 'Ada Finch, AIA', license: 'OH 1412', reviewedOn: '2026-11-20', note: '', ...more });

  it('is asked of the designer, who sees what is built and no price, and attaches the review', async () => {
    const change = await startChange(lent, { structural: true });
    const nobody = await lent.principal.post(changeAt(lent, change.id, 'ask-review'), { version: change.version });
    expect(nobody.body).toMatchObject({ code: 'rule_broken' });
    const designer = await join(lent.principal, lent.job.id, 'designer', 'Ada Finch');
    expect((await designer.get(changeAt(lent, change.id))).status).toBe(404);

    const asked = made<Change>(await lent.principal.post(changeAt(lent, change.id, 'ask-review'), { version: change.version }));
    expect(asked.state).toBe('in_review');
    const mail = await house.mail.wait(designer.email, /Change 1 for 9 Larkspur Court touches the structure: please review it/);
    expect(`${mail.text}${String(mail.html)}`).not.toMatch(/951|\$/);
    const seen = await designer.get(changeAt(lent, change.id));
    expect(seen.body).toMatchObject({ state: 'in_review', chargedCents: null, cost: null, scope: [{ quantity: '28', unit: 'ea' }, { effect: 'deduct' }] });
    expect((await lent.ann.get(changeAt(lent, change.id))).status).toBe(404);

    const reviewed = made<Change>(await designer.post(changeAt(lent, change.id, 'reviews'), reviewOf(await file(designer, 'review'))));
    expect(reviewed.reviews).toMatchObject([{ kind: 'designer_review', reviewerName: 'Ada Finch, AIA', license: 'OH 1412', current: true }]);
    expect(made<Change>(await issue({ ...asked, version: reviewed.version })).state).toBe('issued');
  });

  it('holds for what was reviewed: other members need another review, another price does not', async () => {
    const reviewed = await attachReview(lent, (await startChange(lent, { structural: true })).id);
    const dearer = await edit(reviewed, { lines: [costLine({ unitCost: '44' }), costLine({ description: 'Floor joists 2×10, 16 ft', effect: 'deduct', unitCost: '29.5' })] });
    expect(dearer.reviews).toMatchObject([{ current: true }]);
    const deeper = await edit(dearer, { lines: [costLine({ description: 'Floor joists 2×8, 16 ft' })] });
    expect(deeper.reviews).toMatchObject([{ current: false }]);
    expect((await issue(deeper)).body).toMatchObject({ code: 'review_missing', detail: 'What is built was altered after the review. Attach one for what it is now.' });
    expect((await issueChange(lent, await attachReview(lent, deeper.id))).state).toBe('issued');
  });

  it('is a review that happened, in a file that the homeowner can open, by somebody named', async () => {
    const { id } = await startChange(lent, { structural: true });
    const at = async (more: object) => {
      const answer = await lent.principal.post(changeAt(lent, id, 'reviews'), reviewOf(await file(lent.principal, 'review'), more));
      return ((answer.body as { errors?: { pointer: string }[] }).errors ?? []).map(({ pointer }) => pointer);
    };
    expect(await at({ fileId: v7() })).toEqual(['/fileId']);
    expect(await at({ fileId: await file(lent.principal, 'other') })).toEqual(['/fileId']);
    expect(await at({ reviewedOn: '2099-01-01' })).toEqual(['/reviewedOn']);
    expect(await at({ reviewerName: '' })).toEqual(['/reviewerName']);
    expect(await at({ kind: 'a friend' })).toEqual(['/kind']);
    expect((await lent.ann.post(changeAt(lent, id, 'reviews'), reviewOf(v7()))).status).toBe(403);
    // read by the homeowners once it is out
    const seen = await issueChange(lent, await attachReview(lent, id));
    expect((await lent.ann.get(`/jobs/${lent.job.id}/files/${seen.reviews[0]?.fileId ?? ''}`)).status).toBe(200);
  });

  it('never takes the contract below what is billed', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    await prove(lent, 'Framing');
    const lines = [costLine({ effect: 'deduct', quantity: '1', unitCost: '200000', description: 'No finish' }), costLine({ effect: 'deduct', quantity: '1', unitCost: '80000', description: 'No trim' })];
    const seen = await issueChange(lent, await startChange(lent, { lines, days: 0, milestoneId: lent.milestoneId.Finish }));
    const { id } = await sentDraw(lent);
    await approve(lent, lent.ann, id);
    await approve(lent, lent.ben, id);
    expect((await signChange(lent, lent.ann, seen)).body).toMatchObject({ code: 'rule_broken' });
    const again = await startChange(lent, { lines, days: 0, milestoneId: lent.milestoneId.Finish });
    expect((await issue(again)).body).toMatchObject({ code: 'rule_broken' });
  });
});
