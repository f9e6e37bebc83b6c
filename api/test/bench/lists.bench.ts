import { approvedDraw, lentJob } from '../support/draw-builders.ts';
import { House } from '../support/house.ts';
import { multiply } from './multiply.ts';
import { median, note, timed } from './rows.ts';

const JOBS = 2_000;

/** The lists of a job, and the one of all jobs, before and after the firm has grown to 200,000 rows of record and some thousand jobs. */
describe('lists of a large firm', () => {
  let house: House;
  beforeAll(async () => {
    house = await House.open();
  });
  afterAll(() => house.close());

  it('as each role, against the same lists of a small one', async () => {
    const { url } = await house.web();
    await house.worker();
    const lent = await lentJob(house, url);
    await approvedDraw(lent);
    const lists = ['/jobs?limit=50', ...['record?chain=shared', 'changes', 'draws', 'photos', 'milestones', 'money'].map((list) => `/jobs/${lent.job.id}/${list}`)];
    const times = async (): Promise<Map<string, number>> => {
      const seen = new Map<string, number>();
      for (const [role, who] of Object.entries({ principal: lent.principal, homeowner: lent.ann, lender: lent.lender })) {
        for (const list of lists) {
          const read = async () => {
            const { status } = await who.get(list);
            if (status !== 200) throw new Error(`${role} ${list}: ${status}`);
          };
          await read();
          const runs: number[] = [];
          for (let run = 0; run < 15; run += 1) runs.push(await timed(read));
          seen.set(`${role} ${list.split('/').at(-1)?.split('?')[0]}`, median(runs));
        }
      }
      return seen;
    };
    const small = await times();
    await multiply(house, lent.firmId, JOBS, Number.POSITIVE_INFINITY);
    // people of the firm are on all of its jobs, its homeowners on theirs alone, its lender on forty
    await house.sql(`delete from job_member where role = 'homeowner' and job_id <> $1`, [lent.job.id]);
    await house.sql(`delete from job_member where role <> 'homeowner' and job_id <> $1 and job_id not in (select id from job order by id limit 39)`, [lent.job.id]);
    await house.sql('analyze job_member');
    const [{ rows } = { rows: 0 }] = await house.sql<{ rows: number }>('select count(*)::int as rows from record_entry');
    const large = await times();
    const ratios = [...large].map(([list, time]) => [list, time / (small.get(list) ?? Number.NaN)] as const).sort((a, b) => b[1] - a[1]);
    const worst = ratios[0]!;
    note({
      what: `lists of a firm with ${JOBS.toLocaleString('en-US')} jobs and ${rows.toLocaleString('en-US')} entries of record, as each role`,
      against: 'the same lists of a firm with one job',
      ratio: worst[1],
      target: '≤ 1.5',
      met: worst[1] <= 1.5,
      seen: `worst ${worst[0]} (${large.get(worst[0])?.toFixed(1)} ms); ${ratios.slice(1, 4).map(([list, ratio]) => `${list} ${ratio.toFixed(1)}`).join(', ')}; median ${median(ratios.map(([, ratio]) => ratio)).toFixed(2)}`,
    });
  });
});
