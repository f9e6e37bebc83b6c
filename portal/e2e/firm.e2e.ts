import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { v7 } from 'uuid';
import { lentJob, made, type LentJob } from '../../api/test/support/draw-builders.ts';
import type { House } from '../../api/test/support/house.ts';
import { jpeg } from '../../api/test/support/photos.ts';
import { Visitor } from '../../api/test/support/visitor.ts';
import { desk, phone, type Screen } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const { SHOTS } = process.env;

describe('the people of a job and of a firm, in a browser', () => {
  let stage: Stage;
  let house: House;
  let url: string;
  let browser: Browser;
  let lent: LentJob;

  beforeAll(async () => {
    stage = await openStage();
    ({ house, url, browser } = stage);
    lent = await lentJob(house, url);
  });
  afterAll(() => stage.close());
  // one person signs in at several screens; the limit on codes has a test of its own
  beforeEach(() => house.sql('delete from rate_limit'));

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

  it('an invitation that expired says so, is sent again, and is accepted; a person is removed with a question', async () => {
    const [id, email] = [v7(), 'una@brook.example'];
    made(await lent.principal.post(`/jobs/${lent.job.id}/invitations`, { id, email, name: 'Una Brook', role: 'inspector' }));
    await house.sql('update invitation set expires_at = now() where id = $1', [id]);
    const una = await at(email, phone);
    await una.page.goto(`${url}/jobs/${lent.job.id}?invitation=${id}`);
    await una.page.waitForURL(/sign-in/);
    await una.signIn(`/jobs/${lent.job.id}?invitation=${id}`, 'Una Brook');
    await una.sees('This invitation has expired');
    await una.sees(/Ask Firm \d+ to send it again/);
    await look(una, 'invitation-expired');

    const builder = await at(lent.principal.email, desk);
    await builder.signIn(`/jobs/${lent.job.id}/people`);
    await builder.sees('Expired');
    await look(builder, 'people');
    await builder.press('Send again: Una Brook');
    await builder.sees('The invitation to Una Brook is on its way again.');
    await una.page.reload();
    await una.press(/^Accept the invitation/);
    await una.page.waitForURL((to) => to.pathname === `/jobs/${lent.job.id}`);
    await una.sees('9 Larkspur Court');

    await builder.page.reload();
    await builder.press('Remove: Ben Moss, homeowner');
    await builder.sees('Remove Ben Moss (homeowner) from the job?');
    await builder.sees('is asked for anew from those who stay');
    await look(builder, 'people-remove');
    await builder.press('Remove Ben Moss');
    await builder.sees('Ben Moss is no longer on the job.');
    const ben = await at(lent.ben.email, phone);
    await ben.signIn(`/jobs/${lent.job.id}`);
    await ben.sees('There is nothing here, or it is not for you');
    const small = await at(lent.principal.email, phone);
    await small.signIn(`/jobs/${lent.job.id}/people`);
    await small.page.getByRole('heading', { name: 'People', level: 1 }).waitFor();
    await look(small, 'people');
    for (const someone of [una, builder, small]) expect(someone.troubles.filter((trouble) => !/There is nothing here/.test(trouble))).toEqual([]);
  });

  it('a principal changes a role, ends an access, and has a name erased', async () => {
    const mia = new Visitor(house, url, 'mia@stone.example');
    made(await lent.principal.post(`/firms/${lent.firmId}/invitations`, { id: v7(), email: mia.email, name: 'Mia Stone', role: 'manager' }));
    await mia.signIn();
    made(await lent.principal.post(`/firms/${lent.firmId}/invitations`, { id: v7(), email: 'nils@aho.example', name: 'Nils Aho', role: 'books' }));
    const builder = await at(lent.principal.email, desk);
    await builder.signIn(`/firms/${lent.firmId}`);
    await builder.page.getByRole('combobox', { name: 'Role of Mia Stone' }).selectOption('site');
    await builder.press('Change role: Mia Stone');
    await builder.sees('The role of Mia Stone is changed.');
    await look(builder, 'firm');
    await builder.page.getByRole('combobox', { name: 'Role of Principal 1' }).selectOption('books');
    await builder.press(/^Change role: Principal/);
    await builder.sees('A firm needs a principal. Make somebody else a principal first.');
    await builder.press('End access: Mia Stone');
    await builder.press('End the access of Mia Stone');
    await builder.sees('Mia Stone is no longer in the firm.');
    await builder.press('Erase name and address: Mia Stone');
    await builder.sees('This can’t be undone.');
    await look(builder, 'firm-erase', false);
    await builder.press('Erase for good');
    await builder.sees('Name erased');
    const small = await at(lent.principal.email, phone);
    await small.signIn(`/firms/${lent.firmId}`);
    await small.sees('Nils Aho');
    await look(small, 'firm');
    for (const someone of [builder, small]) expect(someone.troubles).toEqual([]);
  });

  it('a principal writes the letterhead; what is wrong is said at its field', async () => {
    const builder = await at(lent.principal.email, phone);
    await builder.signIn(`/firms/${lent.firmId}/settings`);
    await builder.fill('Name of the firm', 'Birch and Son');
    await builder.fill('Street', '14 Mill Lane');
    await builder.fill('Phone', 'call me');
    await builder.press('Save');
    await builder.sees('Enter the whole address, or leave all of it empty.');
    await builder.sees('Enter a phone number such as (513) 555-0142.');
    await look(builder, 'settings-error', false);
    for (const [label, text] of [['City', 'Fallbrook'], ['State', 'oh'], ['ZIP code', '45011'], ['Phone', '(513) 555-0142'], ['License number', 'OH-GC 20411']] as const) await builder.page.getByLabel(label, { exact: true }).fill(text);
    await builder.page.getByLabel('Site people see what changes cost the homeowners').check();
    await builder.press('Save');
    await builder.sees('Saved. Papers that are made from now on show it.');
    await builder.page.setInputFiles('input[type=file]', { name: 'notes.png', mimeType: 'image/png', buffer: Buffer.from('no picture') });
    await builder.sees('This is not a PNG or JPEG picture.');
    await builder.page.setInputFiles('input[type=file]', { name: 'logo.jpg', mimeType: 'image/jpeg', buffer: await jpeg({ width: 900, height: 360 }) });
    await builder.page.getByRole('img', { name: 'The firm’s logo, as it stands on papers' }).waitFor();
    await look(builder, 'settings');
    expect(await house.sql('select name, state, zip, site_sees_prices from firm where id = $1', [lent.firmId])).toEqual([{ name: 'Birch and Son', state: 'OH', zip: '45011', site_sees_prices: true }]);
    const wide = await at(lent.principal.email, desk);
    await wide.signIn(`/firms/${lent.firmId}/settings`);
    await wide.sees('Letterhead and settings');
    await wide.page.getByRole('img', { name: 'The firm’s logo, as it stands on papers' }).waitFor();
    await look(wide, 'settings');
    for (const someone of [builder, wide]) expect(someone.troubles).toEqual([]);
  });
});
