import type { Browser } from 'playwright-core';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ledgerState, lentJob, payDeposit, prove, type LentJob } from '../../api/test/support/draw-builders.ts';
import { House } from '../../api/test/support/house.ts';
import { principalWithFirm } from '../../api/test/support/builders.ts';
import { onboard } from '../../api/test/support/payments.ts';
import { StripeStandIn } from '../../api/test/support/stripe-stand-in.ts';
import { desk, openBrowser, phone, type Screen } from './support/browser.ts';
import { Someone } from './support/someone.ts';

/** Where pictures of the pages go, when somebody wants to look at them. */
const { SHOTS } = process.env;

describe('a draw in a browser, from draft to paid', () => {
  let house: House;
  let stripe: StripeStandIn;
  let url: string;
  let browser: Browser;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open({ PORTAL_DIST: path.join(import.meta.dirname, '../dist') });
    stripe = await StripeStandIn.for(house);
    ({ url } = await house.web());
    await house.worker({ env: { PUBLIC_URL: url } });
    await stripe.start(url);
    browser = await openBrowser();
    const firm = await principalWithFirm(house, url);
    await onboard(stripe, firm.principal, firm.firmId);
    lent = await lentJob(house, url, { firm });
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    await house.sql('delete from rate_limit');
  });
  afterAll(async () => {
    await browser.close();
    await house.close();
    await stripe.close();
  });

  const at = (who: { email: string }, screen: Screen) => Someone.at(browser, house, url, who.email, screen);
  const look = async (who: Someone, name: string) => {
    // a pointer that rests on the pole opens a band's card
    await who.page.mouse.move(2, 2);
    if (SHOTS) {
      for (const scheme of ['light', 'dark'] as const) {
        await who.page.emulateMedia({ colorScheme: scheme, reducedMotion: 'reduce' });
        await who.page.waitForTimeout(200);
        await who.shot(`${SHOTS}/${name}-${who.page.viewportSize()?.width}-${scheme}.png`);
      }
    }
    expect([name, await who.axe()]).toEqual([name, []]);
    expect([name, await who.overflows()]).toEqual([name, false]);
  };
  const away = (email: string) => house.sql(`update session set present_at = now() - interval '11 minutes' where person_id = (select id from person where email = $1)`, [email]);
  /** Enters the code that the page asked for. */
  const present = async (who: Someone, before: number) => {
    await who.page.getByLabel('Code from the mail').fill(await who.code(before));
    await who.press('Confirm and go on');
  };

  it('is drafted, adjusted and sent; approved by both; funded; paid through the payment page; and shows the same cents everywhere', async () => {
    const draws = `/jobs/${lent.job.id}/draws`;
    const office = await at(lent.principal, desk);
    await office.enter(draws);
    await office.sees('A draw is drafted from what is proven');
    await look(office, 'draws-empty');
    await office.page.getByLabel('Work through', { exact: true }).fill('11/30/2026');
    await office.press('Draft the next draw');
    await office.sees('Draw 1');
    const sheet = office.page.getByRole('grid', { name: 'Draw 1' });
    // by keyboard: floor joists at 35 %, 4,200.00 on hand, supervision at 25 %
    await sheet.getByRole('row', { name: /Floor joists/ }).getByRole('gridcell').nth(2).click();
    await office.page.keyboard.type('35');
    await office.page.keyboard.press('Enter');
    await office.sees('Saved');
    await sheet.getByRole('row', { name: /Floor joists/ }).getByRole('gridcell').nth(4).click();
    await office.page.keyboard.type('4,200');
    await office.page.keyboard.press('Enter');
    await sheet.getByRole('row', { name: /Supervision/ }).getByRole('gridcell').nth(2).click();
    await office.page.keyboard.type('25');
    await office.page.keyboard.press('Enter');
    await office.sees('$125,730.00');
    await office.page.getByLabel('Foundation, photo 1').check();
    await office.press('Attach 1 photo');
    await office.sees('The photos are attached.');
    await look(office, 'draw-editor');
    await office.press('Send draw 1');
    await office.sees('To approve');
    const drawPath = new URL(office.page.url()).pathname;

    const ann = await at(lent.ann, phone);
    await ann.enter(drawPath);
    await ann.sees('What was built since the last draw');
    await away(lent.ann.email);
    await look(ann, 'draw-to-approve');
    const before = house.mail.to(lent.ann.email).length;
    await ann.press('Approve draw 1: you pay $30,000.00');
    await present(ann, before);
    await ann.sees('You approved this draw.');
    await ann.sees('Waits for Ben Moss.');

    const ben = await at(lent.ben, desk);
    await ben.enter(drawPath);
    await ben.press('Object to “Floor joists”');
    await ben.page.getByLabel('Reason').fill('Two joists are cracked.');
    await look(ben, 'draw-objecting');
    await ben.press('Cancel');
    await ben.press('Approve draw 1: you pay $30,000.00');
    await ben.sees('Pay your part');
    await look(ben, 'draw-approved');

    const lender = await at(lent.lender, desk);
    await lender.enter('/lending');
    await lender.sees('$107,500.00 of it was seen in place');
    await look(lender, 'lending');
    await lender.follow('Look at the proof');
    await lender.sees('Proof beside each line');
    await look(lender, 'draw-to-inspect');
    await lender.press('Record the inspection');
    await lender.sees('Say how far you take the work to be');
    await look(lender, 'draw-to-allow');
    await lender.press('Allow these lines');
    await lender.page.getByLabel('Reference').fill('FED 2211');
    await look(lender, 'draw-to-fund');
    await lender.press('Record $95,730.00 as sent');
    await lender.sees('the builder has it');

    await ann.goto(drawPath);
    await ann.sees('Pay your part');
    await look(ann, 'draw-to-pay');
    await ann.press('Pay $30,000.00');
    await ann.page.waitForURL(/\/pay\/cs_/);
    await ann.page.getByLabel('When does a bank debit settle or fail?').selectOption('-1');
    await ann.page.getByRole('button', { name: 'Pay $30,000.00' }).click();
    await ann.page.waitForURL(/\/payments\//);
    await ann.sees('Your payment is on its way');
    await look(ann, 'payment-on-its-way');
    await stripe.control('payments/settle-all');
    await ann.page.getByRole('heading', { name: 'Your payment has arrived' }).waitFor({ timeout: 30_000 });
    await look(ann, 'payment-arrived');
    await house.mail.wait(lent.ann.email, /^Receipt: \$30,000\.00 for Draw 1/);

    for (const who of [office, ann, ben, lender]) {
      await who.goto(drawPath);
      await who.page.locator('main').getByText('Paid', { exact: true }).first().waitFor();
      const said = await who.text();
      for (const sum of ['$125,730.00', '$30,000.00', '$95,730.00']) expect([who.email, said.includes(sum)]).toEqual([who.email, true]);
      await who.goto(`/jobs/${lent.job.id}/money`);
      await who.sees('Billed to date');
      const money = await who.text();
      for (const sum of ['$139,700.00', '$125,730.00', '$6,985.00', '$267,285.00']) expect([who.email, money.includes(sum)]).toEqual([who.email, true]);
      expect(money.includes('Processing fees')).toBe(who === office);
    }
    await look(office, 'money');
    await look(ann, 'money');
    await office.page.getByRole('button', { name: /Paid: how it is worked out/ }).first().click();
    await office.sees('Draw 1: paid');
    await look(office, 'money-opened');
    expect(await ledgerState(house, lent.job.id)).toMatchObject({ sum: 0, owed: 0, byDraws: 0 });
    for (const someone of [office, ann, ben, lender]) expect(someone.troubles).toEqual([]);
  });

  it('lets the principal set up payments at the payment service and come back', async () => {
    const firm = await principalWithFirm(house, url);
    const principal = await at(firm.principal, phone);
    await principal.enter('/payouts');
    await principal.page.getByRole('button', { name: 'Set up payments' }).waitFor();
    await look(principal, 'payouts');
    await principal.press('Set up payments');
    await principal.page.getByRole('link', { name: 'Go on at the payment service' }).click();
    await principal.page.waitForURL(/\/onboard\//);
    await principal.page.getByRole('button').first().click();
    await principal.page.waitForURL(/\/payouts/);
    await principal.page.getByText('Ready', { exact: true }).waitFor({ timeout: 40_000 });
    expect(principal.troubles).toEqual([]);
  });
});
