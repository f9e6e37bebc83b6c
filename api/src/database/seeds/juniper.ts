import { v7 } from 'uuid';
import type { Draw } from '@tallypole/shared/schemas/draws';
import { ChangeWork, demoChanges } from './change-work.ts';
import { demoTerms, type Stage } from './stage.ts';
import { juniperPhases, scheduleOf } from './schedules.ts';
import { SiteWork, sitePlace } from './site-work.ts';

/** A house in framing: a paid draw, one that waits for the homeowners, a change that waits for its second signature, one that lapsed. */
export async function seedJuniper(stage: Stage): Promise<void> {
  const { jobId, milestone } = await setUp(stage);
  const site = new SiteWork(jobId);
  await foundation(stage, site, milestone('Site and foundation'));
  await earlyChanges(stage, jobId, milestone('Dry-in'));
  await floorAndWalls(stage, site, milestone('Floor frame'), milestone('Walls and roof'));
  await openChanges(stage, jobId, milestone('Walls and roof'), milestone('Finishes'));
}

async function setUp(stage: Stage) {
  const { calendar, on, as } = stage;
  on(-118);
  const marit = await as('marit@halvorsen-build.example');
  const jobId = await stage.createJob(marit, '22 Juniper Hill', demoTerms(calendar));
  const { schedule, milestoneId } = scheduleOf(juniperPhases, (i) => calendar.date(-80 + i * 36));
  await marit.post(`jobs/${jobId}/schedule`, schedule);
  await marit.post(`jobs/${jobId}/site`, { latitude: sitePlace.latitude, longitude: sitePlace.longitude, radiusM: 75 });
  await marit.post(`jobs/${jobId}/loan`, { id: v7(), lenderName: 'Fallbrook Savings', amountCents: 36_000_000, constructionCents: 34_000_000, equityFirstCents: 4_000_000, holdbackRate: 1000, consentLimitCents: 500_000, shortfall: 'homeowner', route: 'builder' });
  for (const [email, role] of [['ines@moreau.example', 'homeowner'], ['theo@moreau.example', 'homeowner'], ['ruth@fallbrook-bank.example', 'lender'], ['omar@haddad-inspection.example', 'inspector'], ['greta@lindqvist-structural.example', 'designer']] as const) {
    await stage.invite(marit, jobId, email, role);
  }
  on(-112);
  await new SiteWork(jobId).recordCheck(await as('wes@halvorsen-build.example'), null, 1_500_000, calendar.date(-112), 'Check 4471');
  return { jobId, milestone: (name: string) => milestoneId.get(name) ?? '' };
}

/** The first milestone, and the draw that was paid for it. */
async function foundation({ calendar, on, as, worker }: Stage, site: SiteWork, milestoneId: string): Promise<void> {
  on(-88);
  const lupe = await as('lupe@halvorsen-build.example');
  await site.start(lupe, milestoneId);
  const photos = await site.photograph(lupe, milestoneId, 'foundation', [0, 12, 25].map((minutes) => calendar.instant(-88, minutes)));
  await worker.work();
  await site.claim(lupe, milestoneId, 'Walls stripped, drains in, backfilled to grade.');
  on(-85);
  await site.inspect(await as('omar@haddad-inspection.example'), milestoneId, calendar.date(-85), 'passed', 'Footing drains and dampproofing seen before backfill.');
  on(-83);
  const draw = await site.sendDraw(await as('wes@halvorsen-build.example'), calendar.date(-84), photos);
  on(-81);
  await site.approve(await as('ines@moreau.example'), draw.id);
  const approved = await site.approve(await as('theo@moreau.example'), draw.id);
  await fund({ calendar, on, as }, site.jobId, approved);
  on(-74);
  if (approved.homeownerCents > 0) await site.recordCheck(await as('wes@halvorsen-build.example'), draw.id, approved.homeownerCents, calendar.date(-74), 'Check 4490');
}

async function fund({ calendar, on, as }: Pick<Stage, 'calendar' | 'on' | 'as'>, jobId: string, draw: Draw): Promise<void> {
  on(-78);
  const ruth = await as('ruth@fallbrook-bank.example');
  const review = `jobs/${jobId}/draws/${draw.id}/review`;
  await ruth.post(`${review}/inspections`, { id: v7(), onDate: calendar.date(-78), note: 'Report of the inspector read.' });
  const allowed = await ruth.post<Draw>(`${review}/allowances`, { id: v7(), onDate: calendar.date(-78), note: '', conditions: '', lines: [] });
  if (allowed.loanCents > 0) await ruth.post(`${review}/fundings`, { id: v7(), amountCents: allowed.loanCents, fundedOn: calendar.date(-78), reference: 'Wire 20881' });
}

/** One signed by both, one declined, one that nobody answered. */
async function earlyChanges({ calendar, on, as, worker, firmId }: Stage, jobId: string, dryIn: string): Promise<void> {
  const work = new ChangeWork(jobId, worker);
  on(-70);
  const dev = await as('dev@halvorsen-build.example');
  const window = await work.draft(dev, demoChanges.window(dryIn, calendar.date(-56)));
  await work.issue(dev, window);
  const deck = await work.draft(dev, demoChanges.deck(calendar.date(-56)));
  await work.issue(dev, deck);
  on(-67);
  const ines = await as('ines@moreau.example');
  await work.sign(ines, window.id, 'Ines Moreau');
  await work.decline(ines, deck.id, 'We would rather decide about the deck once we live there.');
  await work.sign(await as('theo@moreau.example'), window.id, 'Theo Moreau');
  on(-50);
  const lapsing = await work.draft(await as('dev@halvorsen-build.example'), { ...demoChanges.tile(dryIn, calendar.date(-40)), title: 'Copper gutters instead of aluminum', reason: 'Half-round copper gutters on the street side, as you had asked about.' });
  await work.issue(await as('dev@halvorsen-build.example'), lapsing);
  on(-39);
  await worker.lapse({ firmId, jobId, changeId: lapsing.id });
}

/** The second milestone proven, the third seen in part, and a draw that waits for the homeowners. */
async function floorAndWalls({ calendar, on, as, worker }: Stage, site: SiteWork, floor: string, walls: string): Promise<void> {
  on(-34);
  const lupe = await as('lupe@halvorsen-build.example');
  await site.start(lupe, floor);
  const photos = await site.photograph(lupe, floor, 'floor', [0, 9, 21].map((minutes) => calendar.instant(-34, minutes)));
  await worker.work();
  await site.claim(lupe, floor, 'Deck glued and screwed, blocking in.');
  on(-31);
  await site.inspect(await as('omar@haddad-inspection.example'), floor, calendar.date(-31), 'passed', 'Bearing, hangers and nailing seen.');
  on(-9);
  const again = await as('lupe@halvorsen-build.example');
  await site.start(again, walls);
  const more = await site.photograph(again, walls, 'walls', [0, 14].map((minutes) => calendar.instant(-9, minutes)));
  await worker.work();
  on(-7);
  await site.inspect(await as('omar@haddad-inspection.example'), walls, calendar.date(-7), 'partial', 'First floor walls stand; trusses not delivered yet.', 3500);
  on(-5);
  await site.sendDraw(await as('wes@halvorsen-build.example'), calendar.date(-6), [...photos, ...more]);
}

/** A structural one with its review that waits for the second signature, and a draft. */
async function openChanges({ calendar, on, as, worker }: Stage, jobId: string, walls: string, finishes: string): Promise<void> {
  const work = new ChangeWork(jobId, worker);
  on(-4);
  const dev = await as('dev@halvorsen-build.example');
  const beam = await work.draft(dev, demoChanges.beam(walls, calendar.date(12)));
  await work.issue(dev, await work.review(dev, beam.id, calendar.date(-5)));
  await work.draft(dev, demoChanges.tile(finishes, calendar.date(30)));
  on(-2);
  await work.sign(await as('ines@moreau.example'), beam.id, 'Ines Moreau');
}
