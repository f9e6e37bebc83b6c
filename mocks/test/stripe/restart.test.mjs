import { afterEach, describe, expect, it } from '@jest/globals';
import { spawn } from 'node:child_process';
import { appendFileSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { call, eventually, receiver, sdk, sessionParams, submit, tempFolder, webhookSecret } from './helpers.mjs';

const program = fileURLToPath(new URL('../../stripe/server.mjs', import.meta.url));

/** @returns {Promise<number>} */
const freePort = () =>
  new Promise((done) => {
    const server = createServer().listen(0, '127.0.0.1', () => {
      const bound = server.address();
      server.close(() => done(typeof bound === 'object' && bound !== null ? bound.port : 0));
    });
  });

describe('a restart', () => {
  /** @type {Array<() => unknown>} */
  let ends = [];
  afterEach(async () => {
    for (const end of ends.reverse()) await end();
    ends = [];
  });

  /** @param {Record<string, string>} env */
  const run = async (env) => {
    const child = spawn(process.execPath, [program], {
      env: { PATH: process.env['PATH'], ...env },
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    let said = '';
    child.stderr.on('data', (part) => (said += String(part)));
    const ended = new Promise((done) => child.once('exit', (code, signal) => done(signal ?? code)));
    /** @param {NodeJS.Signals} signal */
    const stop = async (signal = 'SIGKILL') => {
      child.kill(signal);
      return ended;
    };
    ends.push(() => stop());
    const ready = await Promise.race([new Promise((done) => child.stdout.once('data', done)), ended]);
    return { stop, ended, said: () => said, ready: String(ready) };
  };
  const setUp = async (/** @type {Record<string, string>} */ more = {}) => {
    const port = await freePort();
    const folder = tempFolder();
    ends.push(() => rmSync(folder, { recursive: true, force: true }));
    const env = { PORT: String(port), STRIPE_DATA_DIR: folder, STRIPE_SETTLE_AFTER_MS: '-1', ...more };
    const first = await run(env);
    expect(first.ready).toContain(`http://127.0.0.1:${port}`);
    const stripe = sdk(port);
    const account = await stripe.accounts.create({
      type: 'express',
      capabilities: { card_payments: { requested: true }, us_bank_account_ach_payments: { requested: true } },
    });
    const control = (/** @type {string} */ where, /** @type {object} */ wish = {}) =>
      call(`http://127.0.0.1:${port}`, where, wish, 'POST');
    await control(`accounts/${account.id}/onboard`);
    return { port, folder, env, first, stripe, account, control, on: { stripeAccount: account.id } };
  };

  it('after kill -9 keeps every object, the debit under way and the answers of used keys', async () => {
    const { env, first, stripe, on, control, account } = await setUp();
    const key = { ...on, idempotencyKey: 'across-a-kill' };
    const session = await stripe.checkout.sessions.create(sessionParams(), key);
    await submit(session.url, { outcome: 'settles' });
    const before = await stripe.checkout.sessions.retrieve(
      session.id,
      { expand: ['payment_intent.latest_charge'] },
      on,
    );
    const events = await stripe.events.list({ limit: 100 }, on);
    expect(await first.stop('SIGKILL')).toBe('SIGKILL');
    await run(env);
    expect(
      await stripe.checkout.sessions.retrieve(session.id, { expand: ['payment_intent.latest_charge'] }, on),
    ).toEqual(before);
    expect(await stripe.events.list({ limit: 100 }, on)).toEqual(events);
    expect((await stripe.accounts.retrieve(account.id)).charges_enabled).toBe(true);
    const replayed = await stripe.checkout.sessions.create(sessionParams(), key);
    expect(replayed.id).toBe(session.id);
    expect(replayed.lastResponse.headers['idempotent-replayed']).toBe('true');
    await control(`payments/${session.id}/settle`);
    expect((await stripe.checkout.sessions.retrieve(session.id, {}, on)).payment_status).toBe('paid');
  });

  it('settles a debit whose time came while it was down', async () => {
    const { env, first, stripe, on } = await setUp();
    const session = await stripe.checkout.sessions.create(sessionParams(), on);
    await submit(session.url, { outcome: 'settles', after: '400' });
    await first.stop('SIGKILL');
    await new Promise((done) => setTimeout(done, 450));
    await run(env);
    await eventually(
      async () => (await stripe.checkout.sessions.retrieve(session.id, {}, on)).payment_status === 'paid',
    );
  });

  it('goes on sending a webhook that was refused before it', async () => {
    let open = false;
    const hook = await receiver(() => (open ? 200 : 500));
    ends.push(hook.close);
    const { env, first, stripe, on, control } = await setUp({
      STRIPE_WEBHOOK_URL: hook.url,
      STRIPE_WEBHOOK_SECRET: webhookSecret,
      STRIPE_RETRY_BASE_MS: '50',
    });
    const session = await stripe.checkout.sessions.create(sessionParams(), on);
    await control(`sessions/${session.id}/pay`, { outcome: 'card_paid' });
    await eventually(() => hook.received.some((r) => r.event.type === 'checkout.session.completed'));
    await first.stop('SIGKILL');
    const refused = hook.received.length;
    expect(hook.received.every((r) => r.status === 500)).toBe(true);
    open = true;
    await run(env);
    const accepted = await eventually(() =>
      hook.received.slice(refused).find((r) => r.event.type === 'checkout.session.completed'),
    );
    expect(stripe.webhooks.constructEvent(accepted.raw, accepted.signature, webhookSecret).type).toBe(
      'checkout.session.completed',
    );
  });

  it('loses nothing that was acknowledged when it is killed in the middle of a burst', async () => {
    const { env, first, stripe, on } = await setUp();
    /** @type {string[]} */
    const acknowledged = [];
    /** @type {Promise<unknown> | undefined} */
    let killed;
    const names = Array.from({ length: 90 }, (_, i) => `burst-${String(i).padStart(2, '0')}`);
    const create = (/** @type {string} */ name) =>
      stripe.checkout.sessions.create(sessionParams({ client_reference_id: name }), { ...on, idempotencyKey: name });
    const burst = names.map(async (name) => {
      const session = await create(name).catch(() => undefined);
      if (session) acknowledged.push(session.id);
      if (acknowledged.length >= 10) killed ??= first.stop('SIGKILL');
    });
    await Promise.all(burst);
    await killed;
    expect(acknowledged.length).toBeLessThan(names.length);
    await run(env);
    for (const id of acknowledged) expect((await stripe.checkout.sessions.retrieve(id, {}, on)).id).toBe(id);
    // Whatever the caller knows or doesn't: sending all again makes each of them exactly once.
    for (const name of names) await create(name);
    const all = await stripe.checkout.sessions.list({ limit: 100 }, on);
    expect(all.data.map((s) => s.client_reference_id).sort()).toEqual(names);
  });

  it('leaves out a line that a crash cut short, and refuses a file that is damaged in the middle', async () => {
    const { env, first, folder, stripe, on } = await setUp();
    const session = await stripe.checkout.sessions.create(sessionParams(), on);
    await first.stop('SIGKILL');
    const file = path.join(folder, 'state.jsonl');
    appendFileSync(file, '{"w":[["charge","ch_half');
    const second = await run(env);
    expect((await stripe.checkout.sessions.retrieve(session.id, {}, on)).id).toBe(session.id);
    expect(await second.stop('SIGTERM')).toBe(0);
    const lines = readFileSync(file, 'utf8').split('\n');
    writeFileSync(file, [lines[0], '{"w":', ...lines.slice(1)].join('\n'));
    const third = await run(env);
    expect(await third.ended).toBe(1);
    expect(third.said()).toContain("line 2 can't be read");
  });

  it('says in one line that its port is taken, and leaves the file of the other alone', async () => {
    const { port, env, first, stripe, on } = await setUp();
    const second = await run(env);
    expect(await second.ended).toBe(1);
    expect(second.said().trim()).toBe(`[stripe] port ${port} is taken; set PORT`);
    const session = await stripe.checkout.sessions.create(sessionParams(), on);
    await first.stop('SIGKILL');
    await run(env);
    expect((await stripe.checkout.sessions.retrieve(session.id, {}, on)).id).toBe(session.id);
  });
});
