import { v7 } from 'uuid';
import type { CreateJob, Job } from '@tallypole/shared/schemas/jobs';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { House } from './house.ts';
import { Visitor } from './visitor.ts';

let count = 0;

/** A body that creates a job; the parts that a test is about can be given. */
export function jobInput(firmId: string, terms: Partial<CreateJob['terms']> = {}): CreateJob {
  return {
    id: v7(),
    firmId,
    name: '9 Larkspur Court',
    address: { street: '9 Larkspur Court', city: 'Maple Glen', state: 'OH', zip: '45011' },
    timeZone: 'America/New_York',
    terms: {
      style: 'percent_complete',
      contractSumCents: 40_000_000,
      signedOn: '2026-09-01',
      startOn: '2026-09-15',
      completeBy: '2027-06-30',
      dayKind: 'calendar',
      retainageRate: 0,
      depositCents: 0,
      reviewDays: 5,
      paymentDays: 10,
      lateRate: 0,
      homeownersSign: 'all',
      openBook: false,
      ...terms,
    },
  };
}

/** Somebody new signs up and starts a firm, all through the interface. */
export async function principalWithFirm(house: House, url: string): Promise<{ principal: Visitor; firmId: string }> {
  count += 1;
  const principal = new Visitor(house, url, `principal${count}@firm${count}.example`);
  await principal.signIn();
  await principal.post('/me/name', { name: `Principal ${count}` }, null);
  const firmId = v7();
  const answer = await principal.post('/firms', { id: firmId, name: `Firm ${count}`, timeZone: 'America/New_York' });
  if (answer.status !== 201) throw new Error(answer.text);
  return { principal, firmId };
}

export async function createJob(principal: Visitor, firmId: string, terms: Partial<CreateJob['terms']> = {}): Promise<Job> {
  const answer = await principal.post('/jobs', jobInput(firmId, terms));
  if (answer.status !== 201) throw new Error(answer.text);
  return answer.body as Job;
}

/** Invites somebody to a job and lets them sign in by the code that they are mailed. */
export async function join(principal: Visitor, jobId: string, role: JobRole, name = `The ${role}`): Promise<Visitor> {
  count += 1;
  const guest = new Visitor(principal.house, principal.url, `${role}${count}@people.example`);
  const answer = await principal.post(`/jobs/${jobId}/invitations`, { id: v7(), email: guest.email, name, role });
  if (answer.status !== 201) throw new Error(answer.text);
  await guest.signIn();
  return guest;
}
