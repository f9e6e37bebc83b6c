import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { v7 } from 'uuid';
import { createJob, join, principalWithFirm } from '../../api/test/support/builders.ts';
import { GuestVisitor, linkInput } from '../../api/test/support/guests.ts';
import type { House } from '../../api/test/support/house.ts';
import { jpeg } from '../../api/test/support/photos.ts';
import { smallSchedule } from '../../api/test/support/schedule-builders.ts';
import { upload } from '../../api/test/support/uploads.ts';
import type { Visitor } from '../../api/test/support/visitor.ts';
import { desk, phone, type Screen } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const { SHOTS } = process.env;

describe('an inspector without an account, in a browser', () => {
  let stage: Stage;
  let house: House;
  let url: string;
  let browser: Browser;
  let principal: Visitor;
  let jobId: string;
  let framing: string;

  beforeAll(async () => {
    stage = await openStage();
    ({ house, url, browser } = stage);
    const firm = await principalWithFirm(house, url);
    principal = firm.principal;
    jobId = (await createJob(principal, firm.firmId)).id;
    const { milestoneId } = await smallSchedule(principal, jobId);
    framing = milestoneId['Framing'] ?? '';
    const photo = { name: 'IMG_1.jpg', content: await jpeg({ width: 900, height: 600, taken: '2026:11:12 09:30:15', offset: '-05:00' }) };
    await upload(principal, `/jobs/${jobId}/photos`, { id: v7(), milestoneId: framing, note: 'North wall' }, photo);
    await principal.post(`/jobs/${jobId}/milestones/${framing}/claim`, { version: 1, note: '' });
  });
  afterAll(() => stage.close());

  const at = (email: string, screen: Screen) => Someone.at(browser, house, url, email, screen);
  /** Pictures and axe; a state of a page that is looked at elsewhere only when somebody wants pictures, since axe takes its time. */
  const look = async (who: Someone, name: string, always = true) => {
    if (!SHOTS && !always) return;
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

  it('is sent a link by the lender and proves the milestone from a phone', async () => {
    const ruth = await join(principal, jobId, 'lender', 'Ruth Moor');
    const lender = await at(ruth.email, desk);
    await lender.signIn(`/jobs/${jobId}/milestones/${framing}`);
    await lender.follow('Ask an inspector by link');
    await lender.press('Send the link');
    await lender.sees('Enter at least 2 characters.');
    await look(lender, 'inspectors-error', false);
    await lender.fill('Name of the inspector', 'Jo Marsh');
    const guest = new GuestVisitor(house, url, 'jo@marsh-inspection.example');
    await lender.fill('Their mail address', guest.email);
    await lender.press('Send the link');
    await lender.sees('Mailed');
    await look(lender, 'inspectors');

    const inspector = await at(guest.email, phone);
    const sent: string[] = [];
    inspector.page.on('request', (request) => sent.push(`${request.url()} ${request.headers()['referer'] ?? ''}`));
    const token = await guest.token();
    await inspector.goto(`/guest#${token}`);
    await inspector.sees('The code goes to');
    // the token has left the address, and went nowhere but into the one request that opens the visit
    expect(inspector.page.url()).toBe(`${url}/guest`);
    expect(await inspector.page.evaluate((secret) => JSON.stringify([sessionStorage, localStorage, history.state, document.cookie]).includes(secret), token)).toBe(false);
    expect(await inspector.text()).not.toMatch(/Larkspur|Framing|Ruth|Jo Marsh/);
    expect(guest.codesSoFar()).toBe(0);
    await look(inspector, 'guest-door');
    await inspector.press('Mail me a code');
    const code = await guest.guestCode();
    await inspector.fill('The six digits', code === '000000' ? '111111' : '000000');
    await inspector.press('Open the page');
    await inspector.sees('That code is not right.');
    await look(inspector, 'guest-code', false);
    await inspector.fill('The six digits', ` ${code.slice(0, 3)} ${code.slice(3)}`);
    await inspector.press('Open the page');
    await inspector.sees('9 Larkspur Court, Maple Glen, OH 45011');
    await inspector.sees('Ruth Moor asks you to look.');
    await inspector.page.getByRole('button', { name: /North wall, taken November 12, 2026/ }).waitFor();
    await look(inspector, 'guest-visit');
    expect(sent.filter((line) => line.includes(token))).toEqual([]);

    await inspector.page.locator('input[capture]').setInputFiles({ name: 'IMG_2.jpg', mimeType: 'image/jpeg', buffer: await jpeg({ scene: 5, width: 800, height: 600 }) });
    await inspector.sees('1 of 1 sent');
    // the visit goes on after a reload, which a phone does by itself while one reads the mail
    await inspector.page.reload();
    await inspector.sees('9 Larkspur Court, Maple Glen, OH 45011');
    await inspector.page.getByRole('combobox', { name: 'What you saw' }).selectOption('failed');
    await inspector.press('Refuse the claim');
    await inspector.sees('Say what is missing or wrong.');
    await look(inspector, 'guest-error', false);
    await inspector.page.getByRole('combobox', { name: 'What you saw' }).selectOption('passed');
    await inspector.fill('Company or department', 'Marsh Inspection');
    // a quarter of an hour on site: what is recorded needs a fresh code
    await house.sql(`update guest_session set confirmed_at = confirmed_at - interval '15 minutes'`);
    const before = guest.codesSoFar();
    await inspector.press('Confirm that it is done');
    await inspector.sees('Confirm that it is you');
    await look(inspector, 'guest-fresh-code');
    await inspector.page.getByRole('dialog').getByLabel('The six digits').fill(await guest.guestCode(before));
    await inspector.press('Confirm and record');
    await inspector.sees('What you saw is recorded. Thank you.');
    await look(inspector, 'guest-answered', false);
    await house.mail.wait(principal.email, /^Framing at 9 Larkspur Court is proven$/);

    await inspector.press('Leave this page');
    await inspector.sees('You have left');
    await inspector.goto(`/guest#${token}`);
    await inspector.page.reload();
    await inspector.sees('This link is no longer good');
    await inspector.sees('Look for a newer mail');
    await look(inspector, 'guest-over', false);

    await lender.goto(`/jobs/${jobId}/milestones/${framing}`);
    await lender.sees('Jo Marsh, Marsh Inspection: the lender’s inspector, by a link that the lender sent');
    await lender.goto(`/jobs/${jobId}/inspectors`);
    await lender.sees('Answered');
    for (const someone of [lender, inspector]) expect(someone.troubles).toEqual([]);
  });

  it('whom the builder sends is told that it proves nothing, and so is everybody', async () => {
    const { milestoneId } = await secondJob();
    const builder = await at(principal.email, phone);
    await builder.signIn(`/jobs/${milestoneId.job}/inspectors?milestone=${milestoneId.framing}`);
    await builder.page.getByRole('combobox', { name: 'Whose inspector' }).selectOption('firm');
    await builder.sees('kept as a note and proves nothing');
    await look(builder, 'inspectors-firm', false);
    const input = linkInput({ milestoneIds: [milestoneId.framing], onBehalf: 'firm' });
    await principal.post(`/jobs/${milestoneId.job}/guest-links`, input);
    const guest = new GuestVisitor(house, url, input.email);
    const inspector = await at(guest.email, desk);
    await inspector.goto(`/guest#${await guest.token()}`);
    await inspector.press('Mail me a code');
    await inspector.fill('The six digits', await guest.guestCode());
    await inspector.press('Open the page');
    await inspector.sees('The builder sent you this link, so what you confirm is kept as a note and proves nothing.');
    await inspector.fill('Company or department', 'Marsh Inspection');
    await look(inspector, 'guest-visit-firm');
    await inspector.press('Confirm that it is done');
    await inspector.sees('What you saw is recorded. Thank you.');
    await builder.goto(`/jobs/${milestoneId.job}/milestones/${milestoneId.framing}`);
    await builder.sees('Kept as a note: the builder chose who looked, so it proves nothing.');
    await look(builder, 'milestone-with-note');
    await builder.goto(`/jobs/${milestoneId.job}/inspectors`);
    await builder.press(/^Send again/);
    await builder.sees('A new link is on its way; the old one is dead.');
    await builder.press(/^Take back/);
    await builder.sees('Taken back');
    await look(builder, 'inspectors-revoked', false);
    for (const someone of [builder, inspector]) expect(someone.troubles).toEqual([]);
  });

  async function secondJob() {
    const [{ firm_id: firmId } = { firm_id: '' }] = await house.sql<{ firm_id: string }>('select firm_id from job where id = $1', [jobId]);
    const { id: job } = await createJob(principal, firmId);
    const { milestoneId } = await smallSchedule(principal, job);
    const id = milestoneId['Framing'] ?? '';
    await upload(principal, `/jobs/${job}/photos`, { id: v7(), milestoneId: id }, { name: 'IMG_1.jpg', content: await jpeg({ scene: 3, width: 900, height: 600 }) });
    await principal.post(`/jobs/${job}/milestones/${id}/claim`, { version: 1, note: '' });
    return { milestoneId: { job, framing: id } };
  }
});
