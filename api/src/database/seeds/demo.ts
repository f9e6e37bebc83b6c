import type { INestApplicationContext } from '@nestjs/common';
import { v4, v7 } from 'uuid';
import type { CreateJob } from '@tallypole/shared/schemas/jobs';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { Actor } from '../../common/unit-of-work.ts';
import { demoPeople } from '../../demo/demo-people.ts';
import { FirmsService } from '../../firms/firms.service.ts';
import { JobsService } from '../../jobs/jobs.service.ts';
import { PeopleService } from '../../people/people.service.ts';
import type { SeedPeople } from './seed-people.ts';

type DemoEmail = (typeof demoPeople)[number]['email'];
const nameOf = (email: DemoEmail): string => demoPeople.find((person) => person.email === email)?.name ?? '';

const OHIO = 'America/New_York';
const terms: CreateJob['terms'] = {
  style: 'percent_complete',
  contractSumCents: 48_650_000,
  signedOn: '2026-08-17',
  startOn: '2026-09-08',
  completeBy: '2027-06-18',
  dayKind: 'working',
  retainageRate: 500,
  depositCents: 1_500_000,
  reviewDays: 5,
  paymentDays: 10,
  lateRate: 900,
  homeownersSign: 'all',
  openBook: false,
};

/** The demo's invented people and jobs, made by the acts that people use. */
export async function seedDemo(app: INestApplicationContext, people: SeedPeople): Promise<void> {
  const signIn = (email: DemoEmail) => people.signIn(email, nameOf(email));

  people.at('2026-08-14T14:00:00Z');
  const marit = await signIn('marit@halvorsen-build.example');
  const firmId = v7();
  await app.get(FirmsService).start(marit, { id: firmId, name: 'Halvorsen Building Co.', timeZone: OHIO }, v4());
  const juniper = await createJob(app, marit, { firmId, name: '22 Juniper Hill', street: '22 Juniper Hill', terms });
  const invite = async (email: DemoEmail, role: JobRole) => {
    await app.get(PeopleService).invite(marit, juniper, { id: v7(), email, name: nameOf(email), role }, v4());
    return await signIn(email);
  };
  await invite('ines@moreau.example', 'homeowner');
  await invite('theo@moreau.example', 'homeowner');
  await invite('ruth@fallbrook-bank.example', 'lender');
  await invite('omar@haddad-inspection.example', 'inspector');
  await invite('greta@lindqvist-structural.example', 'designer');

  const sam = await signIn('sam@pruitt-and-daughter.example');
  const otherFirm = v7();
  await app.get(FirmsService).start(sam, { id: otherFirm, name: 'Pruitt & Daughter', timeZone: OHIO }, v4());
  await createJob(app, sam, { firmId: otherFirm, name: '5 Tannery Row', street: '5 Tannery Row', terms: { ...terms, contractSumCents: 21_240_000, depositCents: 0 } });
}

async function createJob(app: INestApplicationContext, actor: Actor, job: { firmId: string; name: string; street: string; terms: CreateJob['terms'] }): Promise<string> {
  const { firmId, name, street } = job;
  const id = v7();
  const input = { id, firmId, name, address: { street, city: 'Maple Glen', state: 'OH', zip: '45011' }, timeZone: OHIO, terms: job.terms };
  await app.get(JobsService).create(actor, input, v4());
  return id;
}
