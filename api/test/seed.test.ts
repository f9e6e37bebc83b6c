import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { spawnSync } from 'node:child_process';
import path from 'node:path';
import { House } from './support/house.ts';

const api = path.join(import.meta.dirname, '..');

describe('the demo data', () => {
  let house: House;

  beforeAll(async () => {
    house = await House.open({ DEMO: 'true' });
  });
  afterAll(() => house.close());

  const seed = () => {
    const done = spawnSync(process.execPath, ['dist/database/seed.js'], { cwd: api, env: house.env, encoding: 'utf8' });
    expect([done.status, done.stderr]).toEqual([0, '']);
    return done.stdout;
  };
  const counts = () => house.sql('select (select count(*) from firm)::int as firms, (select count(*) from job)::int as jobs, (select count(*) from record_entry)::int as entries, (select count(*) from job_member)::int as members');

  it('is made once, by the acts that people use, and leaves a filled database alone', async () => {
    expect(seed()).toContain('The demo data is in place.');
    const before = await counts();
    expect(before).toMatchObject([{ firms: 2 }]);
    expect(seed()).toBe('');
    expect(await counts()).toEqual(before);
  });

  it('lists its people only while demo data is on', async () => {
    const { url } = await house.web();
    const listed = (await (await fetch(`${url}/api/demo/people`)).json()) as { people: { role: string }[] };
    expect(new Set(listed.people.map(({ role }) => role))).toEqual(new Set(['principal', 'manager', 'site', 'books', 'homeowner', 'lender', 'inspector', 'designer']));
    const { url: off } = await house.web({ env: { DEMO: 'false' } });
    expect((await fetch(`${off}/api/demo/people`)).status).toBe(404);
  });

  it('does not start in production with demo data or demo secrets', () => {
    const env = { ...house.env, NODE_ENV: 'production', PUBLIC_URL: 'https://tally.example', JWT_SECRET: `demo${'x'.repeat(40)}` };
    const done = spawnSync(process.execPath, ['dist/web.js'], { cwd: api, env, encoding: 'utf8', timeout: 20_000 });
    expect(done.status).toBe(1);
    expect(done.stderr).toContain('DEMO: must be false in production');
    expect(done.stderr).toContain('JWT_SECRET: must not be a demo secret');
  });
});
