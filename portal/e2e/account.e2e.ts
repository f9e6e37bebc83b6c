import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Authenticator } from '../../api/test/support/authenticator.ts';
import { createJob, join, principalWithFirm } from '../../api/test/support/builders.ts';
import type { House } from '../../api/test/support/house.ts';
import type { Visitor } from '../../api/test/support/visitor.ts';
import { desk, phone, type Screen } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const { SHOTS } = process.env;
const PASSWORD = 'our lumber yard opens at six';

describe('how people get in, in a browser', () => {
  let stage: Stage;
  let house: House;
  let url: string;
  let browser: Browser;
  let principal: Visitor;
  let jobId: string;
  let firmId: string;

  beforeAll(async () => {
    stage = await openStage();
    ({ house, url, browser } = stage);
    ({ principal, firmId } = await principalWithFirm(house, url));
    jobId = (await createJob(principal, firmId)).id;
  });
  afterAll(() => stage.close());

  const at = (email: string, screen: Screen, where = url) => Someone.at(browser, house, where, email, screen);
  const look = async (who: Someone, name: string) => {
    for (const [i, { width, height }] of [phone, desk].entries()) {
      await who.page.setViewportSize({ width, height });
      if (SHOTS) {
        for (const scheme of ['light', 'dark'] as const) {
          await who.page.emulateMedia({ colorScheme: scheme, reducedMotion: 'reduce' });
          await who.page.waitForTimeout(200);
          await who.shot(`${SHOTS}/${name}-${width}-${scheme}.png`);
        }
      }
      expect([name, width, await who.overflows()]).toEqual([name, width, false]);
      if (i === 0) expect([name, await who.axe()]).toEqual([name, []]);
    }
  };
  const homeowner = async (name: string, screen: Screen) => {
    const { email } = await join(principal, jobId, 'homeowner', name);
    await house.sql('delete from rate_limit');
    return await at(email, screen);
  };
  const aged = (email: string) => house.sql(`update session set present_at = now() - interval '1 hour' where person_id = (select id from person where email = $1)`, [email]);
  const section = (who: Someone, name: string) => who.page.getByRole('region', { name });

  it('changes the name, sets a password after proving presence, and signs in by it', async () => {
    const ann = await homeowner('Ann Moss', phone);
    await ann.signIn('/jobs');
    await ann.press('Ann Moss');
    await ann.follow('Your account');
    await ann.page.getByRole('heading', { name: 'Your account', level: 1 }).waitFor();
    await look(ann, 'account');
    await ann.page.getByLabel('Your name').fill('Ann Moss-Grey');
    await ann.press('Save the name');
    await ann.page.getByRole('button', { name: 'Ann Moss-Grey' }).waitFor();

    await aged(ann.email);
    await ann.press('Set a password');
    const field = ann.page.getByLabel('New password', { exact: true });
    await field.fill('short');
    await ann.press('Set the password');
    await ann.sees('Use at least 12 characters.');
    await look(ann, 'account-password-error');
    await field.fill('annmossgrey1234');
    const before = house.mail.to(ann.email).length;
    await ann.press('Set the password');
    await ann.fill('Code from the mail', await ann.code(before));
    await look(ann, 'account-presence');
    await ann.press('Confirm and go on');
    await ann.sees('little more than your name or address');
    expect(await field.inputValue()).toBe('annmossgrey1234');
    await ann.press('Show: New password');
    expect(await field.getAttribute('type')).toBe('text');
    await field.fill(PASSWORD);
    await ann.press('Set the password');
    await ann.sees('Mailed codes work as well.');

    await ann.press('Ann Moss-Grey');
    await ann.press('Sign out');
    await ann.page.waitForURL(/sign-in/);
    await ann.press('Use a password instead');
    await ann.fill('Mail address', ann.email);
    await ann.page.getByLabel('Password', { exact: true }).fill('not the right one');
    await ann.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await ann.sees('Address or password is not right.');
    await look(ann, 'sign-in-password');
    await ann.page.getByLabel('Password', { exact: true }).fill(PASSWORD);
    await ann.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await ann.page.waitForURL(/\/jobs$/);
    await ann.goto('/account');
    await ann.press(/^Remove the password/);
    await ann.sees('You have none: you sign in by mailed codes.');
    expect(ann.troubles).toEqual([]);
  });

  it('sees where else it is signed in, and ends that session under an open page', async () => {
    const ben = await homeowner('Ben Moss', desk);
    const phoneOfBen = await at(ben.email, phone);
    await ben.signIn('/account');
    await phoneOfBen.signIn('/jobs');
    await ben.page.reload();
    await section(ben, 'Sessions').getByText('this one').waitFor();
    await look(ben, 'account-sessions');
    await section(ben, 'Sessions').getByRole('button', { name: /^End: Chrome on Linux/ }).first().click();
    await ben.sees('The session is ended.');
    await phoneOfBen.page.reload();
    await phoneOfBen.page.waitForURL(/sign-in/);
    expect(ben.troubles).toEqual([]);
  });

  it('moves to another address, and whoever reads the old one undoes it by a button', async () => {
    const cora = await homeowner('Cora Moss', phone);
    await cora.signIn('/account');
    await cora.press('Change the address');
    await cora.fill('New mail address', 'cora@elsewhere');
    await cora.press('Mail a code there');
    await cora.sees('Enter a mail address such as name@example.com.');
    await cora.fill('New mail address', 'cora@elsewhere.example');
    await cora.press('Mail a code there');
    await cora.sees('If cora@elsewhere.example can be used');
    const mail = await house.mail.wait('cora@elsewhere.example', /confirms your new address/);
    await look(cora, 'account-address-code');
    await cora.fill('Code from the mail', /^\d{6}/.exec(mail.subject ?? '')?.[0] ?? '');
    await cora.press('Use this address');
    await cora.sees('You sign in with cora@elsewhere.example, and mail goes there.');

    const told = await house.mail.wait(cora.email, /Your address was changed/);
    const reader = await at(cora.email, phone);
    await reader.page.goto(/https?:\/\/\S+address-undo#\S+/.exec(told.text ?? '')?.[0] ?? '');
    await reader.page.getByRole('heading', { name: 'It was not you?' }).waitFor();
    expect(reader.page.url()).not.toContain('#');
    expect(await house.sql('select 1 from person where email = $1', ['cora@elsewhere.example'])).toHaveLength(1);
    await look(reader, 'address-undo');
    await reader.press(/^It was not me/);
    await reader.sees(`You sign in with ${cora.email} again.`);
    await look(reader, 'address-undone');
    await cora.page.reload();
    await cora.page.waitForURL(/sign-in/);
    for (const someone of [cora, reader]) expect(someone.troubles).toEqual([]);
  });

  it('is led to a second step where money is handled, may wait with it, and then signs in by it', async () => {
    const strict = await house.web({ env: { REQUIRE_SECOND_FACTOR: 'true' } });
    const builder = await at(principal.email, desk, strict.url);
    await house.sql('delete from rate_limit');
    const before = house.mail.to(builder.email).length;
    await builder.goto('/sign-in?to=%2Fpayouts');
    await builder.fill('Mail address', builder.email);
    await builder.press('Mail me a code');
    await builder.fill('The six digits', await builder.code(before));
    await builder.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await builder.page.getByRole('heading', { name: 'Your second step' }).waitFor();
    await builder.sees('Your role handles money');
    await look(builder, 'second-step');
    await builder.follow('Not now');
    await builder.page.waitForURL(/\/payouts$/);
    await builder.page.locator('main').getByRole('button').first().click();
    await builder.sees('This needs a second step when you sign in.');
    await look(builder, 'second-step-needed');
    await builder.follow('Set up your second step');
    await builder.press(/^Begin/);
    await builder.page.getByRole('img', { name: /The key for your authenticator/ }).waitFor();
    await look(builder, 'second-step-key');
    const key = (await builder.page.getByText(/^([A-Z2-7]{4} ){7}[A-Z2-7]{4}$/).innerText()).replaceAll(' ', '');
    const authenticator = new Authenticator(key);
    await builder.fill('Six digits', authenticator.wrong());
    await builder.press('Turn it on');
    await builder.sees('That code is not right');
    await builder.fill('Six digits', authenticator.code(-1));
    await builder.press('Turn it on');
    const shown = section(builder, 'Your recovery codes').getByRole('listitem');
    await shown.first().waitFor();
    const codes = await shown.allInnerTexts();
    expect(codes).toHaveLength(10);
    await look(builder, 'second-step-codes');
    const [file] = await Promise.all([builder.page.waitForEvent('download'), builder.press('Save as a file')]);
    expect(file.suggestedFilename()).toBe('Tallypole recovery codes.txt');
    await builder.press('I have kept them');
    await builder.page.waitForURL(/\/payouts$/);

    await builder.press(/^Principal/);
    await builder.press('Sign out');
    await builder.page.waitForURL(/sign-in/);
    const sent = house.mail.to(builder.email).length;
    await builder.fill('Mail address', builder.email);
    await builder.press('Mail me a code');
    await builder.fill('The six digits', await builder.code(sent));
    await builder.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await builder.page.getByRole('heading', { name: 'One more step' }).waitFor();
    await builder.fill('Code of your authenticator', authenticator.wrong());
    await builder.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await builder.sees('That code is not right, or it was used already.');
    await look(builder, 'sign-in-second-step');
    await builder.fill('Code of your authenticator', authenticator.code());
    await builder.page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await builder.page.waitForURL(/\/jobs$/);

    await builder.goto('/account');
    await builder.sees('10 recovery codes are left.');
    await look(builder, 'account-with-second-step');
    await aged(builder.email);
    await builder.press(/^Turn it off/);
    await builder.page.getByRole('dialog').getByRole('button', { name: 'Turn it off' }).click();
    await builder.sees('Or one of your recovery codes.');
    await look(builder, 'account-presence-authenticator');
    await builder.fill('Code of your authenticator', (codes[0] ?? '').toLowerCase());
    await builder.press('Confirm and go on');
    await builder.sees('Set up a second step');
    expect(builder.troubles).toEqual([]);
  });
});
