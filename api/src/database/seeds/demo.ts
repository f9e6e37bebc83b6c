import { v7 } from 'uuid';
import type { ContractTerms } from '@tallypole/shared/schemas/jobs';
import type { FirmRole } from '@tallypole/shared/schemas/roles';
import { demoPeople } from '../../demo/demo-people.ts';
import { SeedCalendar } from './calendar.ts';
import { seedJuniper } from './juniper.ts';
import type { Persona } from './persona.ts';
import type { SeedPeople } from './seed-people.ts';
import type { SeedWorker } from './seed-worker.ts';
import { demoTerms, type DemoEmail, type Stage } from './stage.ts';
import { seedTanager } from './tanager.ts';

const ZONE = 'America/New_York';

/** The demo's invented firms, people and jobs at different stages, made by the acts that people use. */
export async function seedDemo(people: SeedPeople, worker: SeedWorker): Promise<void> {
  const calendar = new SeedCalendar(new Date());
  const nameOf = (email: DemoEmail) => demoPeople.find((person) => person.email === email)?.name ?? '';
  const as = (email: DemoEmail) => people.signIn(email, nameOf(email));
  const on = (day: number, minutes = 0) => people.at(calendar.instant(day, minutes));
  const createJob = createJobIn(ZONE);

  on(-120);
  const marit = await as('marit@halvorsen-build.example');
  const firmId = await startFirm(marit, 'Halvorsen Building Co.');
  const letterhead = { street: '8 Sawmill Road', city: 'Maple Glen', state: 'OH', zip: '45011', phone: '(513) 555-0117', license: 'OH-GC 20411' };
  await marit.post(`firms/${firmId}/settings`, { version: 1, name: 'Halvorsen Building Co.', ...letterhead, siteSeesPrices: false });
  for (const [email, role] of [['dev@halvorsen-build.example', 'manager'], ['lupe@halvorsen-build.example', 'site'], ['wes@halvorsen-build.example', 'books']] as const) await join(marit, firmId, email, nameOf(email), role, as);
  const stage: Stage = {
    calendar, worker, firmId, on, as,
    createJob: (principal, name, terms) => createJob(principal, firmId, name, terms),
    invite: async (principal, jobId, email, role) => {
      await principal.post(`jobs/${jobId}/invitations`, { id: v7(), email, name: nameOf(email), role });
      return await as(email);
    },
  };
  await seedTanager(stage);
  await seedJuniper(stage);

  on(-1);
  await stage.createJob(await as('marit@halvorsen-build.example'), '31 Orchard Bend', { ...demoTerms(calendar), contractSumCents: 39_875_000, signedOn: calendar.date(-2), startOn: calendar.date(20), completeBy: calendar.date(260), depositCents: 0 });
  const sam = await as('sam@pruitt-and-daughter.example');
  const otherFirm = await startFirm(sam, 'Pruitt & Daughter');
  await createJob(sam, otherFirm, '5 Tannery Row', { ...demoTerms(calendar), contractSumCents: 21_240_000, depositCents: 0 });
}

async function startFirm(principal: Persona, name: string): Promise<string> {
  const id = v7();
  await principal.post('firms', { id, name, timeZone: ZONE });
  return id;
}

async function join(principal: Persona, firmId: string, email: DemoEmail, name: string, role: FirmRole, as: (email: DemoEmail) => Promise<Persona>): Promise<void> {
  await principal.post(`firms/${firmId}/invitations`, { id: v7(), email, name, role });
  await as(email);
}

const createJobIn = (timeZone: string) => async (principal: Persona, firmId: string, name: string, terms: ContractTerms): Promise<string> => {
  const id = v7();
  await principal.post('jobs', { id, firmId, name, address: { street: name, city: 'Maple Glen', state: 'OH', zip: '45011' }, timeZone, terms });
  return id;
};
