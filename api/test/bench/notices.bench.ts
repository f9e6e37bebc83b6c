import { execFileSync, fork } from 'node:child_process';
import { once } from 'node:events';
import path from 'node:path';
import { lentJob } from '../support/draw-builders.ts';
import { House } from '../support/house.ts';
import { note } from './rows.ts';

const NOTICES = 10_000;
const ALONE = 3_000;

describe('queued notices', () => {
  let house: House;
  const sink = fork(path.join(import.meta.dirname, 'smtp-sink.mjs'));
  afterAll(async () => {
    sink.disconnect();
    await house.close();
  });

  it(`${NOTICES} of them against nodemailer alone`, async () => {
    const [{ port }] = (await once(sink, 'message')) as [{ port: number }];
    house = await House.open();
    const { url } = await house.web();
    const worker = await house.worker();
    await lentJob(house, url);
    const { text, html } = house.mail.mails.at(-1)!;
    const [model] = await house.sql<{ id: string }>('select id from notice where sent_at is not null and person_id is not null order by created_at desc limit 1');
    worker.kill('SIGTERM');
    await once(worker, 'exit');

    const pooled = () => Number(execFileSync(process.execPath, [path.join(import.meta.dirname, 'send-pooled.mjs')], { encoding: 'utf8', env: { ...process.env, SMTP_URL: `smtp://127.0.0.1:${port}`, COUNT: String(ALONE), TEXT: text ?? '', HTML: String(html) } }));
    const before = pooled();
    const taken = async () => {
      sink.send('taken?');
      return ((await once(sink, 'message')) as [{ taken: number }])[0].taken;
    };
    const had = await taken();
    const made = await house.sql<{ id: string; firmId: string }>(
      `insert into notice (id, firm_id, job_id, kind, person_id, data, created_at) select gen_random_uuid(), n.firm_id, n.job_id, n.kind, n.person_id, n.data, now() from notice n, generate_series(1, $2::int) where n.id = $1 returning id, firm_id as "firmId"`,
      [model?.id, NOTICES],
    );
    await house.as('app_worker', async (client) => (await client.query(`select count(graphile_worker.enqueue('send_notice', json_build_object('noticeId', n->>'id', 'firmId', n->>'firmId'), 'notice:' || (n->>'id'))) from json_array_elements($1::json) n`, [JSON.stringify(made)])).rows);
    const started = performance.now();
    await house.worker({ env: { SMTP_URL: `smtp://127.0.0.1:${port}` } });
    const left = async () => (await house.sql<{ n: number }>('select count(*)::int as n from notice where sent_at is null'))[0]?.n ?? 0;
    while ((await left()) > 0) await new Promise((done) => setTimeout(done, 250));
    const ours = NOTICES / ((performance.now() - started) / 1_000);
    const alone = (before + pooled()) / 2;
    expect((await taken()) - had - ALONE).toBe(NOTICES);
    note({ what: `${NOTICES.toLocaleString('en-US')} queued notices, none lost`, against: 'nodemailer alone, pooled, to the same mail server', ratio: ours / alone, target: '≥ 0.35', met: ours / alone >= 0.35, seen: `${Math.round(ours)} and ${Math.round(alone)}/s` });
  });
});
