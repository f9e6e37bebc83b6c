import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { House } from '../../api/test/support/house.ts';
import { desk, phone } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

describe('the first act in a browser', () => {
  let stage: Stage;
  let house: House;
  let url: string;
  let browser: Browser;

  beforeAll(async () => {
    stage = await openStage();
    ({ house, url, browser } = stage);
  });
  afterAll(() => stage.close());

  it('lets a builder sign up, create a job and invite; the homeowner comes by the mail and sees the job; a stranger does not', async () => {
    const builder = await Someone.at(browser, house, url, 'nora@brightwater.example', desk);
    await builder.signIn('/jobs', 'Nora Quill');
    await builder.follow('Start your firm');
    await builder.fill('Name of the firm', 'Brightwater Homes');
    await builder.press('Start the firm');

    // an empty form names every field and keeps what was typed
    await builder.fill('Contract sum as signed', '486,500');
    await builder.sees('$486,500.00');
    await builder.press('Create the job');
    await builder.sees('There is a problem');
    expect(await builder.page.title()).toMatch(/^Error: /);
    expect(await builder.axe()).toEqual([]);
    await builder.page.reload();
    expect(await builder.page.getByLabel('Contract sum as signed').inputValue()).toBe('486,500.00');
    for (const [label, text] of [['Name of the job', '3 Heron Way'], ['Street', '3 Heron Way'], ['City', 'Maple Glen'], ['State', 'oh'], ['ZIP code', '45011'], ['Signed on', 'March 1, 2027'], ['Work starts', '3/15/27'], ['Complete by', '2027-12-17'], ['Deposit', '15000']] as const) {
      await builder.page.getByLabel(label, { exact: true }).fill(text);
    }
    await builder.press('Create the job');
    await builder.sees('The schedule of values comes first');
    const jobUrl = new URL(builder.page.url()).pathname;

    await builder.follow('People');
    await builder.fill('Name', 'Ida Brook');
    await builder.fill('Mail address', 'ida@brook.example');
    await builder.press('Send the invitation');
    await builder.sees('Invited, not here yet');
    expect(await builder.axe()).toEqual([]);

    const invitation = await house.mail.wait('ida@brook.example', /invites you to 3 Heron Way/);
    const link = /https?:\/\/\S+/.exec(invitation.text ?? '')?.[0] ?? '';
    const homeowner = await Someone.at(browser, house, url, 'ida@brook.example', phone);
    await homeowner.page.goto(link);
    await homeowner.page.waitForURL(/sign-in/);
    await homeowner.signIn(jobUrl);
    await homeowner.sees('$486,500.00');
    expect(await homeowner.overflows()).toBe(false);
    expect(await homeowner.axe()).toEqual([]);

    const stranger = await Someone.at(browser, house, url, 'stranger@example.com', desk);
    await stranger.signIn('/jobs', 'A Stranger');
    await stranger.goto(jobUrl);
    await stranger.sees('There is nothing here, or it is not for you');
    for (const someone of [builder, homeowner]) expect(someone.troubles).toEqual([]);
  });
});
