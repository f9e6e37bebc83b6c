import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { eventually, house, submit } from './helpers.mjs';

describe('the hosted pages', () => {
  /** @type {Awaited<ReturnType<typeof house>>} */
  let h;
  beforeAll(async () => {
    h = await house({ settleAfterMs: 12_000 });
  });
  afterAll(() => h.stop());

  const read = async (/** @type {string} */ path) => {
    const response = await fetch(path.startsWith('http') ? path : `${h.url}${path}`);
    return { status: response.status, headers: response.headers, text: await response.text() };
  };

  it('say first that no money moves, and need neither script nor anything from elsewhere', async () => {
    const session = await h.checkout();
    const link = await h.stripe.accountLinks.create({
      account: h.account.id,
      type: 'account_onboarding',
      refresh_url: 'http://127.0.0.1:4300/a',
      return_url: 'http://127.0.0.1:4300/b',
    });
    for (const page of [String(session.url), '/', link.url, '/pay/cs_none', '/nothing']) {
      const { text, headers } = await read(page);
      const body = text.slice(text.indexOf('<body>'));
      expect(
        body
          .replace(/<[^>]*>/g, '')
          .trim()
          .startsWith('Stand-in payment page. No money moves.'),
      ).toBe(true);
      expect(text).not.toMatch(/<script|javascript:|(src|href)="https?:\/\/(?!127\.0\.0\.1)/);
      expect(headers.get('content-security-policy')).toContain("default-src 'none'");
    }
  });

  it('show who is paid, how much and for what, escaped, with a label for each control', async () => {
    const session = await h.checkout({
      line_items: [
        {
          quantity: 1,
          price_data: { currency: 'usd', unit_amount: 123_456, product_data: { name: '<b>Draw & "4"</b>' } },
        },
      ],
      custom_text: { submit: { message: 'Retainage is not part of this.' } },
    });
    const { text } = await read(String(session.url));
    expect(text).toContain('Pay Fern Hollow Builders');
    expect(text).toContain('$1,234.56');
    expect(text).toContain('&#60;b&#62;Draw &#38; &#34;4&#34;&#60;/b&#62;');
    expect(text).toContain('Retainage is not part of this.');
    expect(text).toContain('value="owner@maple.example"');
    const controls = [...text.matchAll(/<(?:input|select) [^>]*?id="([^"]+)"/g)].map((m) => m[1]);
    expect(controls.length).toBeGreaterThan(8);
    for (const id of controls) expect(text).toContain(`<label for="${id}">`);
  });

  it('offer only what the session takes, and hold on to what was typed', async () => {
    const session = await h.checkout({ allowed_payment_method_types: ['us_bank_account'] });
    const { text } = await read(String(session.url));
    expect(text).toContain('value="returned"');
    expect(text).not.toContain('value="card_paid"');
    const refused = await submit(session.url, { outcome: 'card_paid', name: 'Ann Maple' });
    const shown = await refused.text();
    expect([refused.status, shown.includes('role="alert"'), shown.includes('value="Ann Maple"')]).toEqual([
      402,
      true,
      true,
    ]);
    expect((await submit(session.url, { outcome: 'gold' })).status).toBe(402);
  });

  it('take the delay from the environment or from the address', async () => {
    const session = await h.checkout();
    expect((await read(String(session.url))).text).toContain('<option value="12000" selected>After 12 seconds');
    expect((await read(`${session.url}?settle_after_ms=3000`)).text).toContain(
      '<option value="3000" selected>After 3 seconds',
    );
  });

  it('go back without paying, and the session stays open', async () => {
    const session = await h.checkout();
    const back = await submit(session.url, { step: 'cancel' });
    expect([back.status, back.headers.get('location')]).toEqual([303, 'http://127.0.0.1:4300/not-paid']);
    expect((await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).status).toBe('open');
    // A browser holds the redirect after a form to form-action too.
    expect((await read(String(session.url))).headers.get('content-security-policy')).toContain(
      "form-action 'self' http://127.0.0.1:4300",
    );
  });

  it('settle, dispute and decide by a button on the payment afterwards', async () => {
    const session = await h.checkout();
    await submit(session.url, { outcome: 'settles', after: '-1' });
    const page = `/pay/${session.id}`;
    expect((await read(page)).text).toContain('bank debit under way');
    const press = (/** @type {string} */ step) =>
      fetch(`${h.url}${page}/${step}`, { method: 'POST' }).then((r) => r.text());
    expect(await press('settle')).toContain('$12,500.00: paid');
    expect(await press('settle')).toContain('is not a bank debit under way');
    const receipt = String((await h.stripe.charges.list({ limit: 1 }, h.on)).data[0]?.receipt_url);
    expect((await read(receipt)).text).toContain('$12,500.00');
    expect(await press('dispute')).toContain('dispute needs response');
    expect(await press('won')).toContain('dispute won');
    expect((await read('/')).text).toContain(`href="${page}"`);
  });

  it('refuse a form that another site sends', async () => {
    const session = await h.checkout();
    const forged = await fetch(String(session.url), {
      method: 'POST',
      body: 'step=pay&outcome=card_paid',
      headers: { 'Sec-Fetch-Site': 'cross-site' },
    });
    expect(forged.status).toBe(403);
    expect((await h.stripe.checkout.sessions.retrieve(session.id, {}, h.on)).status).toBe('open');
  });

  it('show a session that ran out as expired', async () => {
    const session = await h.checkout();
    await h.control('clock', { advance_ms: 24 * 3_600_000 + 1000 });
    await eventually(async () => (await read(String(session.url))).text.includes('expired'));
  });
});
