import autocannon from 'autocannon';
import { fork, type ChildProcess } from 'node:child_process';
import path from 'node:path';
import { connect } from '../../../mocks/postgres.mjs';
import { approvedDraw, lentJob, type LentJob } from '../support/draw-builders.ts';
import { freePort, House } from '../support/house.ts';
import { byTurns, note } from './rows.ts';

const POOL = '10';
const CONNECTIONS = 32;
const SECONDS = 4;

describe('a job page', () => {
  let house: House;
  let url: string;
  let lent: LentJob;
  let bare: ChildProcess | undefined;

  beforeAll(async () => {
    house = await House.open({ DATABASE_POOL: POOL });
    ({ url } = await house.web());
    await house.worker();
    lent = await lentJob(house, url);
    await approvedDraw(lent);
  });
  afterAll(async () => {
    bare?.disconnect();
    await house.close();
  });

  it('against a bare handler', async () => {
    const page = await lent.ann.get(`/jobs/${lent.job.id}/house`);
    const port = await freePort();
    const server = connect(JSON.parse(process.env['TEST_PG'] ?? '{}') as Parameters<typeof connect>[0]);
    bare = fork(path.join(import.meta.dirname, 'bare-nest.mjs'), { env: { PATH: process.env['PATH'], NODE_ENV: 'test', DATABASE_URL: server.url('tally_owner', house.database), DATABASE_POOL: POOL, PORT: String(port), JOB_ID: lent.job.id } });
    bare.send(page.text);
    await new Promise((ready, fail) => bare?.once('message', ready).once('exit', fail));
    const cookie = lent.ann.cookie();
    const p99: [number, number] = [0, 0];
    // a person has a limit on reading; it counts this page as often as it is asked, so it is lifted for the measurement
    const ours = async () => {
      await house.sql('delete from rate_limit');
      const seen = await autocannon({ url: `${url}/api/jobs/${lent.job.id}/house`, connections: CONNECTIONS, duration: SECONDS, headers: { cookie } });
      p99[0] = seen.latency.p99;
      if (seen.non2xx > 0) throw new Error(`${seen.non2xx} answers were refused.`);
      return seen.requests.average;
    };
    const theirs = async () => {
      const seen = await autocannon({ url: `http://127.0.0.1:${port}/bare`, connections: CONNECTIONS, duration: SECONDS });
      p99[1] = seen.latency.p99;
      return seen.requests.average;
    };
    await ours();
    await theirs();
    const [fast, bareFast] = await byTurns(3, ours, theirs);
    const late = p99[0] / p99[1];
    note({
      what: `job page data, ${CONNECTIONS} connections`,
      against: 'a bare Nest handler: one indexed query, the same bytes',
      ratio: fast / bareFast,
      target: '≥ 0.25, p99 ≤ 4 ×',
      met: fast / bareFast >= 0.25 && late <= 4,
      seen: `${Math.round(fast)} and ${Math.round(bareFast)} requests/s, p99 ${late.toFixed(1)} ×, ${page.text.length} bytes`,
    });
    expect(page.status).toBe(200);
  });
});
