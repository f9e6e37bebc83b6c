import { approvedDraw, lentJob } from '../support/draw-builders.ts';
import { House } from '../support/house.ts';
import { multiply } from './multiply.ts';
import { median, note, timed } from './rows.ts';

const JOBS = 400;

describe("a lender's page", () => {
  let house: House;
  beforeAll(async () => {
    house = await House.open();
  });
  afterAll(() => house.close());

  it(`over ${JOBS} jobs of 40 firms`, async () => {
    const { url } = await house.web();
    await house.worker();
    const lent = await lentJob(house, url);
    await approvedDraw(lent);
    const read = async () => (await lent.lender.get('/lending')).body as { items: unknown[] };
    const one = await read();
    await multiply(house, lent.firmId, JOBS - 1, 10);
    expect((await read()).items.length).toBe(one.items.length * JOBS);
    const times: number[] = [];
    for (let run = 0; run < 15; run += 1) times.push(await timed(read));
    const seen = median(times);
    note({ what: `lender's page over ${JOBS} jobs of 40 firms`, against: '100 ms', ratio: seen / 100, target: '≤ 1', met: seen <= 100, seen: `${Math.round(seen)} ms` });
  });
});
