import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { v7 } from 'uuid';
import type { Members } from '@tallypole/shared/schemas/members';
import { createJob, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

describe('the people of a firm', () => {
  let house: House;
  let url: string;

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

  it('are nobody else\'s business', async () => {
    const { firmId } = await principalWithFirm(house, url);
    const { principal: stranger } = await principalWithFirm(house, url);
    expect((await stranger.get(`/firms/${firmId}/members`)).status).toBe(404);
    expect((await stranger.get(`/firms/${firmId}/pricing`)).status).toBe(404);
    expect((await stranger.post(`/firms/${firmId}/invitations`, { id: v7(), email: 'x@example.com', name: 'Xavier', role: 'site' })).status).toBe(404);
  });
});
