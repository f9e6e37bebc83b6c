import { demoTerms, type Stage } from './stage.ts';
import { scheduleOf, tanagerPhases } from './schedules.ts';
import { SiteWork } from './site-work.ts';

/** A small house in close-out: everything proven and billed, the retainage still held. */
export async function seedTanager(stage: Stage): Promise<void> {
  const { calendar, on, as, worker } = stage;
  on(-119);
  const marit = await as('marit@halvorsen-build.example');
  const terms = { ...demoTerms(calendar), contractSumCents: 21_240_000, signedOn: calendar.date(-300), startOn: calendar.date(-290), completeBy: calendar.date(-14), retainageRate: 1000, depositCents: 0, homeownersSign: 'one' as const };
  const jobId = await stage.createJob(marit, '7 Tanager Lane', terms);
  const { schedule, milestoneId } = scheduleOf(tanagerPhases, (i) => calendar.date(-220 + i * 80));
  await marit.post(`jobs/${jobId}/schedule`, schedule);
  await stage.invite(marit, jobId, 'ines@moreau.example', 'homeowner');
  await stage.invite(marit, jobId, 'omar@haddad-inspection.example', 'inspector');
  const site = new SiteWork(jobId);
  for (const [i, id] of [...milestoneId.values()].entries()) {
    on(-60 + i * 12);
    const lupe = await as('lupe@halvorsen-build.example');
    await site.photograph(lupe, id, (['foundation', 'floor', 'walls'] as const)[i] ?? 'walls', [calendar.instant(-60 + i * 12)]);
    await worker.work();
    await site.claim(lupe, id, 'Done.');
    await site.inspect(await as('omar@haddad-inspection.example'), id, calendar.date(-60 + i * 12), 'passed', 'Seen on site.');
  }
  on(-13);
  const draw = await site.sendDraw(await as('wes@halvorsen-build.example'), calendar.date(-14), []);
  on(-12);
  const approved = await site.approve(await as('ines@moreau.example'), draw.id);
  on(-6);
  await site.recordCheck(await as('wes@halvorsen-build.example'), draw.id, approved.homeownerCents, calendar.date(-6), 'Check 1180');
}
