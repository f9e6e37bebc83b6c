import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { v7 } from 'uuid';
import { jobInput } from './support/builders.ts';
import { approvedDraw, drawAt, lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House, until } from './support/house.ts';
import { inState, onboard, openPage } from './support/payments.ts';
import { StripeStandIn } from './support/stripe-stand-in.ts';
import { Visitor } from './support/visitor.ts';

interface Line {
  level: number;
  time: number;
  req?: { id: string; method: string; path: string };
  res?: { status: number };
  person?: string;
  responseTime?: number;
}

describe('what the servers log, at its most talkative', () => {
  let house: House;
  let stripe: StripeStandIn;
  let url: string;
  let lent: LentJob;
  let log: string;
  const text = () => readFileSync(log, 'utf8');
  const lines = () => text().split('\n').filter((line) => line !== '').map((line) => JSON.parse(line) as Line);

  beforeAll(async () => {
    house = await House.open({ LOG_LEVEL: 'debug' });
    log = path.join(house.folder, 'all.log');
    stripe = await StripeStandIn.for(house);
    await house.worker({ logTo: log });
    ({ url } = await house.web({ logTo: log }));
    await stripe.start(url);
    lent = await lentJob(house, url);
  });
  afterAll(async () => {
    await house.close();
    await stripe.close();
  });

  it('is one JSON object a line, each request with its id, who, what and how long', async () => {
    const missing = await lent.ann.get(`/jobs/${v7()}?secret=shown`);
    const { requestId } = missing.body as { requestId: string };
    const [ann] = await house.sql<{ id: string }>('select id from person where email = $1', [lent.ann.email]);
    await until(() => text().includes(requestId), 'the line');
    const line = lines().find(({ req }) => req?.id === requestId);
    expect(line).toMatchObject({ level: 30, req: { method: 'GET', path: expect.stringMatching(/^\/api\/jobs\/[0-9a-f-]{36}$/) as unknown }, res: { status: 404 }, person: ann?.id });
    expect(typeof line?.responseTime).toBe('number');
    expect(Math.abs((line?.time ?? 0) - Date.now())).toBeLessThan(60_000);
  });

  it('holds no code, cookie, token, secret, address or anything typed, after signing in, a mistake, a draw and a payment', async () => {
    await onboard(stripe, lent.principal, lent.firmId);
    const draw = await approvedDraw(lent);
    const { paymentId, sessionId } = await openPage(lent, lent.ann, draw.id, 3_000_000);
    await stripe.control(`sessions/${sessionId}/pay`, { outcome: 'settles', after_ms: -1 });
    await stripe.control(`payments/${sessionId}/settle`);
    await inState(lent, lent.ann, paymentId, 'settled');
    const url = (await house.sql<{ url: string | null }>('select url from payment_attempt where payment_id = $1', [paymentId]))[0]?.url;
    const carol = new Visitor(house, lent.ann.url, 'carol.unlucky@people.example');
    await carol.signIn();
    const code = await carol.latestCode();
    await carol.post('/auth/sessions', { email: carol.email, code: '987650' }, null);
    await carol.post('/me/name', { name: 'Carol Quillfeather' }, null);
    // what the database refuses: its words for that repeat what was typed
    const typed = 'Ridgepole Gable Terrace';
    const input = { ...jobInput(lent.firmId), name: typed };
    made(await lent.principal.post('/jobs', input));
    expect((await lent.principal.post('/jobs', input)).status).toBe(409);
    await lent.principal.post('/jobs', { ...input, id: typed });
    await fetch(`${lent.ann.url}/api/jobs`, { method: 'POST', headers: { origin: lent.ann.url, 'content-type': 'application/json', cookie: lent.ann.cookie() }, body: `{"name":"${typed}` });
    await fetch(`${lent.ann.url}/api/payments/webhook`, { method: 'POST', headers: { 'content-type': 'application/json', 'stripe-signature': 't=1,v1=feedfacefeedface' }, body: '{"id":"evt_forged"}' });
    // a mail that is refused with its receiver's address in the refusal
    house.mail.refusing = true;
    made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id: v7(), email: 'refused.guest@people.example', name: 'Pat Rowe', role: 'homeowner' }));
    await until(() => text().includes('job failed'), 'the mail to fail');
    house.mail.refusing = false;
    await until(() => text().includes('/api/payments/webhook'), 'the last line');
    const cookies = [lent.ann, lent.principal, carol].flatMap((who) => who.cookie().split('; ').map((pair) => pair.split('=')[1] ?? ''));
    const secrets = ['JWT_SECRET', 'CODE_SECRET', 'STRIPE_SECRET_KEY', 'STRIPE_WEBHOOK_SECRET'].map((name) => house.env[name] ?? '');
    const passwords = ['DATABASE_WRITE_URL', 'DATABASE_READ_URL', 'DATABASE_WORKER_URL', 'QUEUE_URL'].map((name) => new URL(house.env[name] ?? '').password);
    const words = ['people.example', 'firm1.example', 'Ann Moss', 'Quillfeather', 'Larkspur', typed, 'Pat Rowe', '987650', 'feedface', 'Not now.', 'secret=shown', '3000000'];
    const told = text();
    const found = [code, ...cookies, ...secrets, ...passwords, ...(url ? [url] : []), ...words].filter((word) => word.length > 3 && told.includes(word));
    expect(found).toEqual([]);
    expect(cookies.filter((cookie) => cookie.length > 20)).toHaveLength(cookies.length);
    // it said enough all the same
    expect(told).toContain('"task":"send_notice"');
    expect((await lent.ann.get(drawAt(lent, draw.id))).status).toBe(200);
  });

  it('cannot be forged by what stands in a name or an address', async () => {
    const before = lines().length;
    const forged = '{"level":60,"msg":"forged line"}';
    for (const name of [`x\n${forged}`, `x\r\n${forged}`, `x\u2028${forged}`, `\u001b[2J${forged}`]) await lent.principal.post('/me/name', { name }, null);
    for (const at of [`%0a${encodeURIComponent(forged)}`, `%0d%0a${encodeURIComponent(forged)}`, '%00', '%1b%5b2J']) await fetch(`${url}/api/jobs/${at}`, { headers: { cookie: lent.ann.cookie(), 'user-agent': 'forged' } });
    await until(() => lines().length >= before + 8, 'eight lines');
    expect(lines().filter(({ level }) => level === 60)).toEqual([]);
    expect(/\p{Cc}/u.test(text().replaceAll('\n', ''))).toBe(false);
  });
});
