import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Members } from '@tallypole/shared/schemas/members';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { linkInput } from './support/guests.ts';
import { House } from './support/house.ts';
import { jpeg } from './support/photos.ts';
import { smallSchedule } from './support/schedule-builders.ts';
import { upload } from './support/uploads.ts';
import { Visitor } from './support/visitor.ts';

describe('the people of a firm', () => {
  let house: House;
  let url: string;
  let made = 0;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
  });
  afterAll(() => house.close());

  it('come in by the address they were invited at, in their role, and see the firm\'s jobs', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const site = new Visitor(house, url, 'lou@firm.example');
    const invited = await principal.post(`/firms/${firmId}/invitations`, { id: v7(), email: site.email, name: 'Lou Ferris', role: 'site' });
    expect([invited.status, (invited.body as Members).invitations.length]).toEqual([201, 1]);
    expect((await house.mail.wait(site.email, /invites you into the firm/)).text).toContain('photograph from your phone');
    const me = await site.signIn();
    expect(me).toMatchObject({ person: { name: 'Lou Ferris' }, firms: [{ id: firmId, role: 'site' }] });
    expect((await site.get(`/jobs/${job.id}`)).body).toMatchObject({ roles: ['site'] });
    expect((await site.get(`/jobs/${job.id}/changes`)).body).toMatchObject({ approvedCents: null });
    expect((await site.get(`/firms/${firmId}/pricing`)).status).toBe(403);
    expect((await site.post(`/firms/${firmId}/invitations`, { id: v7(), email: 'more@firm.example', name: 'More', role: 'site' })).status).toBe(403);
    const again = await principal.post(`/firms/${firmId}/invitations`, { id: v7(), email: site.email, name: 'Lou Ferris', role: 'books' });
    expect([again.status, (again.body as { errors: { pointer: string }[] }).errors[0]?.pointer]).toEqual([409, '/email']);
  });

  it('change their role, and the firm is never without a principal', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const mia = await member(principal, firmId, 'manager');
    const ids = async () => Object.fromEntries(((await principal.get(`/firms/${firmId}/members`)).body as Members).members.map(({ email, personId }) => [email, personId]));
    const own = (await ids())[principal.email] ?? '';
    const role = (by: Visitor, personId: string, to: string) => by.post(`/firms/${firmId}/members/${personId}/role`, { role: to });
    const last = await role(principal, own, 'books');
    expect([last.status, (last.body as { detail: string }).detail]).toEqual([422, 'A firm needs a principal. Make somebody else a principal first.']);
    const mias = (await ids())[mia.email] ?? '';
    expect((await role(mia, mias, 'principal')).status).toBe(403);
    expect((await role(principal, mias, 'site')).status).toBe(201);
    expect((await mia.get(`/jobs/${job.id}`)).body).toMatchObject({ roles: ['site'] });
    expect((await mia.get(`/firms/${firmId}/pricing`)).status).toBe(403);
    expect((await role(principal, mias, 'principal')).status).toBe(201);
    // two principals who demote each other at once: one of them stays
    const both = await Promise.all([role(principal, mias, 'books'), role(mia, own, 'books')]);
    expect(both.map(({ status }) => status).sort()).not.toEqual([201, 201]);
    expect(await house.sql(`select 1 from firm_member where firm_id = $1 and role = 'principal'`, [firmId])).toHaveLength(1);
    const entries = await house.sql<{ act: string; data: object }>(`select data->>'act' as act, data->'data' as data from record_entry where job_id = $1 and data->>'act' like 'member.%' order by seq`, [job.id]);
    expect(entries[0]).toEqual({ act: 'member.role_set', data: { person: mias, role: 'site' } });
  });

  it('leave at once; what they did keeps their name, their links die, and their mail goes to a principal', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const mia = await member(principal, firmId, 'manager', 'Mia Stone');
    const job = await createJob(mia, firmId);
    const { milestoneId } = await smallSchedule(mia, job.id);
    const framing = milestoneId['Framing'] ?? '';
    await upload(mia, `/jobs/${job.id}/photos`, { id: v7(), milestoneId: framing }, { name: 'IMG_1.jpg', content: await jpeg({ width: 320, height: 240 }) });
    expect((await mia.post(`/jobs/${job.id}/milestones/${framing}/claim`, { version: 1, note: '' })).status).toBe(201);
    const link = linkInput({ milestoneIds: [framing], onBehalf: 'town' });
    expect((await mia.post(`/jobs/${job.id}/guest-links`, link)).status).toBe(201);
    const lender = await join(principal, job.id, 'lender');
    const people = ((await principal.get(`/firms/${firmId}/members`)).body as Members).members;
    const end = (by: Visitor, email: string) => by.post(`/firms/${firmId}/members/${people.find((found) => found.email === email)?.personId ?? ''}/end`);
    expect((await end(mia, principal.email)).status).toBe(403);
    const own = await end(principal, principal.email);
    expect([own.status, (own.body as { detail: string }).detail]).toEqual([422, 'Another principal has to end your own access.']);
    const ended = await end(principal, mia.email);
    expect([ended.status, (ended.body as Members).members.map(({ email }) => email)]).toEqual([201, [principal.email]]);
    for (const path of [`/jobs/${job.id}`, `/firms/${firmId}/members`, `/jobs/${job.id}/milestones`]) expect([path, (await mia.get(path)).status]).toEqual([path, 404]);
    expect((await mia.post(`/jobs/${job.id}/milestones/${framing}/start`, { version: 2 })).status).toBe(404);
    expect((await house.mail.wait(mia.email, /^You are no longer on Firm \d+$/)).text).toContain('has ended your access to');
    expect(await house.sql('select 1 from guest_link where id = $1 and revoked_at is not null', [link.id])).toHaveLength(1);

    // she claimed it and set up the job: what was meant for her is a principal's now
    expect((await lender.get(`/jobs/${job.id}/milestones/${framing}`)).body).toMatchObject({ claimedBy: { name: 'Mia Stone' } });
    expect((await lender.post(`/jobs/${job.id}/milestones/${framing}/inspections`, { id: v7(), version: 2, result: 'passed', seenOn: '2026-01-05' })).status).toBe(201);
    await house.mail.wait(principal.email, /^Framing at 9 Larkspur Court is proven$/);
    expect(house.mail.to(mia.email).some(({ subject }) => /is proven/.test(subject ?? ''))).toBe(false);
    const record = await house.sql<{ text: string }>(`select text from record_entry where job_id = $1 and data->>'act' = 'member.left'`, [job.id]);
    expect(record).toHaveLength(1);
    expect(record[0]?.text).not.toContain('Mia');

    // invited again she is in again
    expect((await principal.post(`/firms/${firmId}/invitations`, { id: v7(), email: mia.email, name: 'Mia Stone', role: 'site' })).status).toBe(201);
    await mia.post('/invitations/accept', {}, null);
    expect((await mia.get(`/jobs/${job.id}`)).body).toMatchObject({ roles: ['site'] });
  });

  it('are invited for 14 days; the invitation is sent again or taken back', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const nils = new Visitor(house, url, 'nils@firm.example');
    const id = v7();
    await principal.post(`/firms/${firmId}/invitations`, { id, email: nils.email, name: 'Nils Aho', role: 'books' });
    await house.sql('update firm_invitation set expires_at = now() where id = $1', [id]);
    await nils.signIn();
    expect((await nils.get(`/firms/${firmId}/members`)).status).toBe(404);
    expect((await nils.get(`/invitations/${id}`)).body).toMatchObject({ state: 'expired', jobId: null, firmId });
    const again = await principal.post(`/firms/${firmId}/invitations/${id}/again`);
    expect((again.body as Members).invitations).toMatchObject([{ id, state: 'open' }]);
    expect((await principal.post(`/firms/${firmId}/invitations/${id}/revoke`)).status).toBe(201);
    await nils.post('/invitations/accept', {}, null);
    expect((await nils.get(`/firms/${firmId}/members`)).status).toBe(404);
    expect((await nils.get(`/invitations/${id}`)).body).toMatchObject({ state: 'revoked' });
    expect((await principal.post(`/firms/${firmId}/invitations/${id}/again`)).status).toBe(409);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.post(`/firms/${firmId}/invitations/${id}/revoke`)).status).toBe(404);
  });

  async function member(principal: Visitor, firmId: string, role: string, name = 'Mia Stone'): Promise<Visitor> {
    made += 1;
    const somebody = new Visitor(house, url, `${role}${made}@members.example`);
    await principal.post(`/firms/${firmId}/invitations`, { id: v7(), email: somebody.email, name, role });
    await somebody.signIn();
    return somebody;
  }

  it('are nobody else\'s business', async () => {
    const { firmId } = await principalWithFirm(house, url);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(`/firms/${firmId}/members`)).status).toBe(404);
    expect((await stranger.get(`/firms/${firmId}/pricing`)).status).toBe(404);
    expect((await stranger.post(`/firms/${firmId}/invitations`, { id: v7(), email: 'x@example.com', name: 'Xavier', role: 'site' })).status).toBe(404);
  });
});
