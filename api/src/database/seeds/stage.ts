import type { ContractTerms } from '@tallypole/shared/schemas/jobs';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { demoPeople } from '../../demo/demo-people.ts';
import type { SeedCalendar } from './calendar.ts';
import type { Persona } from './persona.ts';
import type { SeedWorker } from './seed-worker.ts';

export type DemoEmail = (typeof demoPeople)[number]['email'];
export const demoTerms = (calendar: SeedCalendar): ContractTerms => ({
  style: 'percent_complete', contractSumCents: 48_650_000, signedOn: calendar.date(-118), startOn: calendar.date(-105), completeBy: calendar.date(190), dayKind: 'working',
  retainageRate: 500, depositCents: 1_500_000, reviewDays: 5, paymentDays: 10, lateRate: 900, homeownersSign: 'all', openBook: false,
});

/** What the demo's jobs are made with. */
export interface Stage {
  calendar: SeedCalendar;
  worker: SeedWorker;
  firmId: string;
  /** The clock stands at this day from now on. */
  on: (day: number, minutes?: number) => void;
  /** Somebody signs in anew: sessions and proofs of presence are as old as the clock says. */
  as: (email: DemoEmail) => Promise<Persona>;
  createJob: (principal: Persona, name: string, terms: ContractTerms) => Promise<string>;
  invite: (principal: Persona, jobId: string, email: DemoEmail, role: JobRole) => Promise<Persona>;
}
