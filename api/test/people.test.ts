import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Change } from '@tallypole/shared/schemas/changes';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { JobPeople, MyInvitation } from '@tallypole/shared/schemas/people';
import { createJob, principalWithFirm } from './support/builders.ts';
import { changeAt, issueChange, signChange, startChange, withPaper } from './support/change-builders.ts';
import { approve, drawAt, lentJob, made, prove, sentDraw, type LentJob } from './support/draw-builders.ts';
import { linkInput } from './support/guests.ts';
import { House, until } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

const DAY_MS = 86_400_000;

describe('people of a job', () => {
  let house: House;
  let url: string;

  beforeAll(async () => {
    house = await House.open();
    ({ url } = await house.web());
    await house.worker({ env: { PUBLIC_URL: url } });
  });
  afterAll(() => house.close());

  const idOf = async (email: string) => (await house.sql<{ id: string }>('select id from person where email = $1', [email]))[0]?.id ?? '';
  const acts = async (jobId: string) =>
    (await house.sql<{ act: string }>(`select data->>'act' as act from record_entry where job_id = $1 and chain = 'shared' order by seq`, [jobId])).map(({ act }) => act);

  describe('who are invited', () => {
    let principal: Visitor;
    let firmId: string;
    let jobId: string;

    beforeAll(async () => {
      ({ principal, firmId } = await principalWithFirm(house, url));
      ({ id: jobId } = await createJob(principal, firmId));
    });

    async function invite(email: string): Promise<string> {
      const id = v7();
      made(await principal.post(`/jobs/${jobId}/invitations`, { id, email, name: 'Ida Brook', role: 'homeowner' }));
      return id;
    }
    const open = async () => (made<JobPeople>(await principal.get(`/jobs/${jobId}/people`)).invitations);

    it('have 14 days, are told when it is over, and are in again once it was sent again', async () => {
      const ida = new Visitor(house, url, 'ida@late.example');
      const id = await invite(ida.email);
      const [shown] = await open();
      expect(Date.parse(shown?.expiresAt ?? '') - Date.parse(shown?.sentAt ?? '')).toBe(14 * DAY_MS);
      expect(shown?.state).toBe('open');
      expect((await house.mail.wait(ida.email, /invites you to/)).text).toContain(`/jobs/${jobId}?invitation=${id}`);
      await house.sql(`update invitation set expires_at = now() where id = $1`, [id]);
      await ida.signIn();
      expect((await ida.get(`/jobs/${jobId}`)).status).toBe(404);
      expect(made<MyInvitation>(await ida.get(`/invitations/${id}`))).toMatchObject({ state: 'expired', jobId, firmName: expect.stringMatching(/^Firm/) as unknown, senderName: expect.stringMatching(/^Principal/) as unknown });
      expect((await open())[0]?.state).toBe('expired');
      made(await principal.post(`/jobs/${jobId}/invitations/${id}/again`));
      await until(() => house.mail.to(ida.email).filter(({ subject }) => /invites you to/.test(subject ?? '')).length === 2, 'the second mail');
      made(await ida.post('/invitations/accept', {}, null));
      expect((await ida.get(`/jobs/${jobId}`)).status).toBe(200);
      expect(made<MyInvitation>(await ida.get(`/invitations/${id}`)).state).toBe('accepted');
      const late = await principal.post(`/jobs/${jobId}/invitations/${id}/revoke`);
      expect([late.status, (late.body as { detail: string }).detail]).toEqual([409, 'Ida Brook has accepted it already.']);
    });

    it('stay out once it was taken back, and the address can be invited anew', async () => {
      const tom = new Visitor(house, url, 'tom@late.example');
      const id = await invite(tom.email);
      expect(made<JobPeople>(await principal.post(`/jobs/${jobId}/invitations/${id}/revoke`)).invitations).toEqual([]);
      await tom.signIn();
      expect((await tom.get(`/jobs/${jobId}`)).status).toBe(404);
      expect(made<MyInvitation>(await tom.get(`/invitations/${id}`)).state).toBe('revoked');
      expect((await principal.post(`/jobs/${jobId}/invitations/${id}/again`)).status).toBe(409);
      await invite(tom.email);
      made(await tom.post('/invitations/accept', {}, null));
      expect((await tom.get(`/jobs/${jobId}`)).status).toBe(200);
      expect(await acts(jobId)).toEqual(expect.arrayContaining(['invitation.sent_again', 'invitation.revoked']));
    });

    it('are nobody\'s business but their own and the firm\'s', async () => {
      const id = await invite('una@late.example');
      const ida = new Visitor(house, url, 'ida@late.example');
      await ida.signIn();
      const { principal: stranger } = await principalWithFirm(house, url);
      for (const who of [ida, stranger]) expect((await who.get(`/invitations/${id}`)).status).toBe(404);
      expect((await ida.post(`/jobs/${jobId}/invitations/${id}/revoke`)).status).toBe(403);
      expect((await stranger.post(`/jobs/${jobId}/invitations/${id}/again`)).status).toBe(404);
      const { id: other } = await createJob(principal, firmId);
      expect((await principal.post(`/jobs/${other}/invitations/${id}/revoke`)).status).toBe(404);
    });
  });

  describe('who leave', () => {
    let lent: LentJob;

    const remove = async (who: Visitor, role: string, by: Visitor = lent.principal) => by.post(`/jobs/${lent.job.id}/people/${await idOf(who.email)}/remove`, { role });
    const detail = (answer: { body: unknown }) => (answer.body as { detail: string }).detail;

    it('lose access at once, take their links with them, and everybody concerned is told', async () => {
      lent = await lentJob(house, url);
      const link = linkInput({ milestoneIds: [lent.milestoneId.Framing], onBehalf: 'lender' });
      made(await lent.lender.post(`/jobs/${lent.job.id}/guest-links`, link));
      expect((await remove(lent.lender, 'homeowner')).status).toBe(404);
      expect((await remove(lent.lender, 'lender', lent.ann)).status).toBe(403);
      const after = made<JobPeople>(await remove(lent.lender, 'lender'));
      expect(after.people.map(({ name }) => name)).not.toContain('Lee Banks');
      for (const path of ['', '/draws', '/milestones', '/people']) expect([path, (await lent.lender.get(`/jobs/${lent.job.id}${path}`)).status]).toEqual([path, 404]);
      expect(await house.sql('select 1 from guest_link where id = $1 and revoked_at is not null and token_hash is null', [link.id])).toHaveLength(1);
      expect((await house.mail.wait(lent.lender.email, /^You are no longer on 9 Larkspur Court$/)).text).toContain('has ended your access to 9 Larkspur Court as lender.');
      expect((await house.mail.wait(lent.ann.email, /^Lee Banks is no longer on 9 Larkspur Court$/)).text).not.toContain('asked for anew');
      expect((await acts(lent.job.id)).at(-1)).toBe('person.removed');
      expect((await remove(lent.lender, 'lender')).status).toBe(404);
    });

    it('leave nothing waiting for them: a change that both must sign is asked for anew of who stays', async () => {
      lent = await lentJob(house, url);
      const change = await issueChange(lent, await startChange(lent));
      made(await signChange(lent, lent.ann, change));
      expect(made<Change>(await lent.ann.get(changeAt(lent, change.id))).state).toBe('partly_signed');
      const before = house.mail.to(lent.ann.email).length;
      made(await remove(lent.ben, 'homeowner'));
      const told = await house.mail.wait(lent.ann.email, /^Ben Moss is no longer on 9 Larkspur Court$/);
      expect(told.text).toContain('What waited for their word is asked for anew from those who stay: Change 1.');
      const again = await withPaper(lent, change.id);
      expect([again.state, again.signers.map(({ name, signedAt }) => [name, signedAt])]).toEqual(['issued', [['Ann Moss', null]]]);
      await until(() => house.mail.to(lent.ann.email).slice(before).some(({ subject }) => /Change 1/.test(subject ?? '')), 'the paper in the mail');
      const signed = made<Change>(await signChange(lent, lent.ann, again));
      expect(signed.state).toBe('approved');
      expect((await signChange(lent, lent.ben, again, 'Ben Moss')).status).toBe(404);
    });

    it('leave nothing waiting for them: a draw that both must approve is approved by who stays', async () => {
      lent = await lentJob(house, url);
      await prove(lent, 'Foundation');
      const { id } = await sentDraw(lent);
      await approve(lent, lent.ann, id);
      made(await remove(lent.ben, 'homeowner'));
      expect((await house.mail.wait(lent.ann.email, /^Ben Moss is no longer on 9 Larkspur Court$/)).text).toContain('Draw 1');
      expect(made<Draw>(await lent.ann.get(drawAt(lent, id)))).toMatchObject({ state: 'submitted', approvals: [], awaited: [{ name: 'Ann Moss' }] });
      expect((await approve(lent, lent.ann, id)).state).toBe('approved');
    });

    it('leave nothing waiting for an invitation that is taken back either', async () => {
      lent = await lentJob(house, url);
      await prove(lent, 'Foundation');
      const { id } = await sentDraw(lent);
      const invitation = v7();
      made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id: invitation, email: 'third@people.example', name: 'Cleo Moss', role: 'homeowner' }));
      await approve(lent, lent.ann, id);
      await approve(lent, lent.ben, id);
      made(await lent.principal.post(`/jobs/${lent.job.id}/invitations/${invitation}/revoke`));
      for (const who of [lent.ann, lent.ben]) expect((await house.mail.wait(who.email, /^The invitation of Cleo Moss to 9 Larkspur Court is taken back$/)).text).toContain('Draw 1');
      await approve(lent, lent.ann, id);
      expect((await approve(lent, lent.ben, id)).state).toBe('approved');
    });

    it('are not the only one whose word is waited for', async () => {
      lent = await lentJob(house, url);
      made(await remove(lent.ben, 'homeowner'));
      const change = await issueChange(lent, await startChange(lent));
      const refused = await remove(lent.ann, 'homeowner');
      expect([refused.status, detail(refused)]).toEqual([409, expect.stringContaining('This is the only homeowner, and something waits for their word.')]);
      expect((await lent.ann.get(`/jobs/${lent.job.id}`)).status).toBe(200);
      made(await lent.principal.post(changeAt(lent, change.id, 'withdraw'), { reason: 'The owner has changed.' }));
      made(await remove(lent.ann, 'homeowner'));
      expect((await lent.ann.get(`/jobs/${lent.job.id}`)).status).toBe(404);
    });

    it('keep their name on what they signed', async () => {
      lent = await lentJob(house, url);
      const change = await issueChange(lent, await startChange(lent));
      made(await signChange(lent, lent.ann, change));
      made(await signChange(lent, lent.ben, change, 'Ben Moss'));
      made(await remove(lent.ben, 'homeowner'));
      const kept = made<Change>(await lent.principal.get(changeAt(lent, change.id)));
      expect([kept.state, kept.signers.map(({ name, signedAt }) => [name, signedAt !== null])]).toEqual(['approved', [['Ann Moss', true], ['Ben Moss', true]]]);
    });
  });
});
