import { readFileSync } from 'node:fs';
import path from 'node:path';
import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { lentJob, prove, type LentJob } from '../../api/test/support/draw-builders.ts';
import { House } from '../../api/test/support/house.ts';
import { desk, openBrowser, phone, type Screen } from './support/browser.ts';
import { Someone } from './support/someone.ts';

const dist = path.join(import.meta.dirname, '../dist');
/** Where pictures of the pages go, when somebody wants to look at them. */
const { SHOTS } = process.env;

describe('what every page rests on', () => {
  let house: House;
  let url: string;
  let browser: Browser;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open({ PORTAL_DIST: dist });
    ({ url } = await house.web());
    await house.worker({ env: { PUBLIC_URL: url } });
    browser = await openBrowser();
    lent = await lentJob(house, url);
    await prove(lent, 'Foundation');
    await house.sql('delete from rate_limit');
  });
  afterAll(async () => {
    await browser.close();
    await house.close();
  });

  const at = (email: string, screen: Screen) => Someone.at(browser, house, url, email, screen);
  const look = async (who: Someone, name: string) => {
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

  it('signs in by keyboard alone, says what is wrong, and opens the pole by arrow keys', async () => {
    const ann = await at(lent.ann.email, desk);
    const { keyboard } = ann.page;
    await ann.page.goto(`${url}/jobs/${lent.job.id}`);
    await ann.page.waitForURL(/sign-in/);
    await ann.page.getByRole('heading', { name: 'Sign in' }).waitFor();
    await look(ann, 'sign-in');
    await keyboard.press('Tab');
    await keyboard.type('ann at home');
    await keyboard.press('Enter');
    await ann.sees('Enter a mail address such as name@example.com.');
    expect(await ann.page.evaluate(() => document.activeElement?.textContent)).toContain('There is a problem');
    await look(ann, 'sign-in-error');
    // the summary's link leads to the field
    await keyboard.press('Tab');
    await keyboard.press('Enter');
    await keyboard.press('Control+A');
    await keyboard.type(lent.ann.email);
    const before = house.mail.to(lent.ann.email).length;
    await keyboard.press('Enter');
    await ann.sees('Mail another code in');
    const code = await ann.code(before);
    const wrong = code === '000000' ? '111111' : '000000';
    await keyboard.type(wrong);
    await keyboard.press('Enter');
    await ann.sees('That code is not right.');
    await look(ann, 'sign-in-code');
    await ann.page.getByLabel('The six digits').focus();
    await keyboard.press('Control+A');
    // as a mail program may copy it
    await keyboard.insertText(` ${code.slice(0, 3)}${code.slice(3)} `);
    await keyboard.press('Enter');
    await ann.page.waitForURL((to) => to.pathname === `/jobs/${lent.job.id}`);

    await ann.sees('Foundation is proven');
    const band = ann.page.getByRole('link', { name: /^Foundation: / });
    await band.focus();
    await keyboard.press('ArrowUp');
    expect(await ann.page.evaluate(() => document.activeElement?.getAttribute('aria-label'))).toMatch(/^Framing: /);
    await ann.page.getByText('Scheduled').filter({ visible: true }).first().waitFor();
    await look(ann, 'house-band-open');
    await keyboard.press('Enter');
    await ann.page.getByRole('heading', { name: 'Framing', level: 1 }).waitFor();
    expect(ann.troubles).toEqual([]);
  });

  it('opens a band of the lying pole by a tap, its neighbor from there, and goes there by the second tap', async () => {
    const ben = await at(lent.ben.email, phone);
    await ben.enter(`/jobs/${lent.job.id}`);
    await ben.page.getByRole('link', { name: /^Foundation: / }).tap();
    await ben.page.locator('dl').getByText('$100,000.00').first().waitFor();
    await look(ben, 'strip-open');
    expect(new URL(ben.page.url()).pathname).toBe(`/jobs/${lent.job.id}`);
    await ben.page.getByRole('button', { name: 'Above: Framing' }).tap();
    await ben.page.locator('dl').getByText('$150,000.00').first().waitFor();
    await ben.page.getByRole('link', { name: /^Framing: / }).tap();
    await ben.page.getByRole('heading', { name: 'Framing', level: 1 }).waitFor();
    expect(ben.troubles).toEqual([]);
  });

  it('leads back after a session that ended in the middle of a form, with what was typed; nobody else finds it', async () => {
    const builder = await at(lent.principal.email, phone);
    const form = `/firms/${lent.firmId}/jobs/new`;
    await builder.enter(form);
    await builder.fill('Name of the job', '5 Sorrel Bend');
    await builder.fill('Contract sum as signed', '310,000');
    await builder.press('Choose from a calendar: Signed on');
    await builder.page.getByRole('dialog', { name: 'Signed on' }).getByRole('button', { name: /^15 / }).waitFor();
    await look(builder, 'calendar');
    await builder.page.keyboard.press('Escape');
    await builder.page.getByRole('dialog').waitFor({ state: 'detached' });
    await house.sql('update session set ended_at = now() where person_id = (select id from person where email = $1)', [lent.principal.email]);
    for (const [label, text] of [['Street', '5 Sorrel Bend'], ['City', 'Maple Glen'], ['State', 'OH'], ['ZIP code', '45011'], ['Signed on', 'March 1, 2027'], ['Work starts', '3/15/27'], ['Complete by', '2027-12-17']] as const) {
      await builder.page.getByLabel(label, { exact: true }).fill(text);
    }
    await builder.press('Create the job');
    await builder.sees('Your session has ended.');
    await look(builder, 'session-ended');
    const before = house.mail.to(lent.principal.email).length;
    await builder.fill('Mail address', lent.principal.email);
    await builder.press('Mail me a code');
    await builder.fill('The six digits', await builder.code(before));
    await builder.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await builder.page.waitForURL((to) => to.pathname === form);
    expect(await builder.page.getByLabel('Name of the job').inputValue()).toBe('5 Sorrel Bend');
    expect(await builder.page.getByLabel('Contract sum as signed').inputValue()).toBe('310,000.00');

    // a second person at the same tab, without the first one signing out
    await house.sql('update session set ended_at = now() where person_id = (select id from person where email = $1)', [lent.principal.email]);
    await builder.press('Create the job');
    await builder.sees('Your session has ended.');
    const other = await at(lent.ann.email, phone);
    const sent = house.mail.to(lent.ann.email).length;
    await builder.fill('Mail address', lent.ann.email);
    await builder.press('Mail me a code');
    await builder.fill('The six digits', await other.code(sent));
    await builder.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await builder.page.waitForURL((to) => to.pathname === form);
    expect(await builder.page.getByLabel('Name of the job').inputValue()).toBe('');
    expect(builder.troubles).toEqual([]);
  });

  it('renews a session whose short token ran out without anybody noticing, in two tabs at once', async () => {
    const ann = await at(lent.ann.email, desk);
    await ann.enter(`/jobs/${lent.job.id}/people`);
    const second = await ann.context.newPage();
    await second.goto(`${url}/jobs/${lent.job.id}`);
    await second.getByText('Foundation is proven').first().waitFor();
    const refreshes: number[] = [];
    ann.context.on('response', (answer) => {
      if (answer.url().endsWith('/api/auth/refresh')) refreshes.push(answer.status());
    });
    const tokens = (await ann.context.cookies()).filter(({ name }) => name === 'tally');
    expect(tokens).toHaveLength(1);
    await ann.context.clearCookies({ name: tokens[0]!.name });
    await Promise.all([ann.page.reload(), second.reload()]);
    await ann.sees('Ben Moss');
    await second.getByText('Foundation is proven').first().waitFor();
    // once for both, or once each where one tab had not heard yet of the other's; never once per request
    expect([[204], [204, 204]]).toContainEqual(refreshes);
    expect(ann.troubles).toEqual([]);
  });

  it('remembers dark over sign-out, and signs out of the server', async () => {
    const ben = await at(lent.ben.email, desk);
    await ben.enter(`/jobs/${lent.job.id}`);
    await ben.press('Ben Moss');
    await look(ben, 'person-menu');
    await ben.page.getByRole('button', { name: 'Dark', exact: true }).click();
    await ben.page.getByRole('button', { name: 'Sign out' }).click();
    await ben.page.waitForURL(/sign-in/);
    await ben.page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });
    await ben.page.reload();
    await ben.page.locator('html[data-mantine-color-scheme="dark"]').waitFor();
    await ben.goto(`/jobs/${lent.job.id}`);
    await ben.page.waitForURL(/sign-in/);
    expect(ben.troubles).toEqual([]);
  });

  it('says that there is no connection, and asks an older page to be loaded before an act', async () => {
    const id = readFileSync(path.join(dist, 'build-id.txt'), 'utf8');
    expect((await fetch(`${url}/api/health`)).headers.get('build-id')).toBe(id);
    const builder = await at(lent.principal.email, phone);
    await builder.enter(`/jobs/${lent.job.id}/people`);
    await builder.page.getByRole('heading', { name: 'People', level: 1 }).waitFor();
    await builder.context.setOffline(true);
    await builder.sees('No connection.');
    await look(builder, 'offline');
    await builder.context.setOffline(false);
    await builder.page.getByText('No connection.').waitFor({ state: 'detached' });

    await builder.context.route('**/api/**', async (route) => {
      const answer = await route.fetch();
      await route.fulfill({ response: answer, headers: { ...answer.headers(), 'build-id': 'another' } });
    });
    await builder.follow('House');
    await builder.goto(`/jobs/${lent.job.id}/people`);
    await builder.sees('There is a newer version of this page.');
    await builder.fill('Name', 'Ida Brook');
    await builder.fill('Mail address', 'ida@brook.example');
    await builder.press('Send the invitation');
    await builder.sees('so nothing was sent');
    await look(builder, 'outdated');
    expect(await house.sql(`select 1 from invitation where email = 'ida@brook.example'`)).toEqual([]);
    await builder.context.unroute('**/api/**');
    await builder.page.locator('form').getByRole('button', { name: 'Load the page again' }).click();
    await builder.page.waitForFunction(() => document.querySelector<HTMLInputElement>('input[type=email]')?.value === 'ida@brook.example');
    await builder.press('Send the invitation');
    await builder.sees('Invited, not here yet');
    expect(builder.troubles).toEqual([]);
  });

  it('shows a stranger and a wrong address the same page', async () => {
    const stranger = await at('stranger@example.com', phone);
    await stranger.page.goto(`${url}/jobs`);
    await stranger.signIn('/jobs', 'A Stranger');
    for (const address of [`/jobs/${lent.job.id}`, '/jobs/018f4e2a-0000-7000-8000-000000000000', '/no/such/page']) {
      await stranger.goto(address);
      await stranger.sees('There is nothing here, or it is not for you');
    }
    await look(stranger, 'nothing-here');
    // React reports what a page refuses to show; nothing else may be reported
    expect(stranger.troubles.filter((trouble) => !/Problem: There is nothing here/.test(trouble))).toEqual([]);
  });
});
