import type { Browser } from 'playwright-core';
import path from 'node:path';
import { writeFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { lentJob, prove, type LentJob } from '../../api/test/support/draw-builders.ts';
import type { House } from '../../api/test/support/house.ts';
import { pdf } from '../../api/test/support/uploads.ts';
import { desk, phone } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const shots = process.env['SHOTS'];
const shoot = async (who: Someone, name: string): Promise<void> => {
  if (shots) await who.shot(path.join(shots, `${name}.png`));
};

describe('a change, from its price to the last signature', () => {
  let stage: Stage;
  let house: House;
  let url: string;
  let browser: Browser;
  let lent: LentJob;

  beforeAll(async () => {
    stage = await openStage();
    ({ house, url, browser } = stage);
    lent = await lentJob(house, url);
    await prove(lent, 'Foundation');
  });
  afterAll(() => stage.close());

  it('is priced at a desk, reviewed, sent out, and signed by both homeowners on their phones', async () => {
    const builder = await Someone.at(browser, house, url, lent.principal.email, desk);
    await builder.enter(`/jobs/${lent.job.id}/changes`);
    await builder.follow('Price a change');
    await builder.fill('What it is, in a few words', 'Deeper joists in the great room');
    await builder.fill('Why, in plain words', 'The great room spans farther than first drawn. Deeper joists keep the floor from bouncing.');
    await builder.page.getByLabel('It touches the structure').check();
    await builder.page.getByLabel('It belongs to').selectOption({ label: 'Framing' });
    await builder.fill('More calendar days', '2');
    await builder.page.getByLabel('The price holds until', { exact: true }).fill('March 19, 2099');
    await builder.page.getByRole('checkbox', { name: 'Photo 1' }).check();
    // pasted from a spreadsheet: one line taken out, one added, one for labor
    const sheet = builder.page.getByRole('grid', { name: 'Lines of the change' });
    await sheet.getByRole('gridcell').first().click();
    const rows = ['Floor joists 2×12, 16 ft\tadded\tmaterial\t28\tea\t43.1875\tyes', 'Floor joists 2×10, 16 ft\ttaken out\tmaterial\t28\tea\t29.50\tyes', 'Carpenter\tadded\tlabor\t6.5\th\t62\tno'].join('\n');
    await builder.page.evaluate((text) => {
      const data = new DataTransfer();
      data.setData('text/plain', text);
      document.activeElement?.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }));
    }, rows);
    await builder.page.getByRole('status').filter({ hasText: '+$951.37' }).waitFor();
    await shoot(builder, 'editor-1280');
    expect(await builder.axe()).toEqual([]);
    await builder.press('Keep as draft');

    // structural: it can't go out before somebody who may say so has looked at it
    await builder.sees('Not reviewed yet');
    await builder.press(/^Send out for/);
    await builder.sees('A structural change needs its review');
    const sheetFile = path.join(house.env['FILES_DIR'] ?? '', '../joist-sheet.pdf');
    writeFileSync(sheetFile, pdf());
    await builder.page.locator('input[type=file]').setInputFiles(sheetFile);
    await builder.sees('The file has arrived.');
    await builder.fill('Who reviewed it', 'P. Wren, PE');
    await builder.page.getByLabel('License').fill('OH 55512');
    await builder.page.getByLabel('Reviewed on', { exact: true }).fill('11/20/2026');
    await builder.press('Attach the review');
    await builder.page.getByRole('link', { name: 'joist-sheet.pdf' }).waitFor();
    await shoot(builder, 'firm-1280');
    await builder.press(/^Send out for \+\$951\.37/);
    await builder.sees('Waits for a decision');

    const mail = await house.mail.wait(lent.ann.email, /Change 1 for 9 Larkspur Court: \+\$951\.37, please decide by/);
    const link = /https?:\/\/\S+changes\S+/.exec(mail.text ?? '')?.[0] ?? '';
    const ann = await Someone.at(browser, house, url, lent.ann.email, phone);
    await ann.signIn(new URL(link).pathname);
    for (const words of ['Deeper joists in the great room', '$400,951.37', 'July 2, 2027', 'P. Wren, PE', 'you, in cash']) await ann.sees(words);
    expect(await ann.text()).not.toMatch(/mark-up|overhead|net cost/i);
    expect(await ann.overflows()).toBe(false);
    await shoot(ann, 'decide-360');
    expect(await ann.axe()).toEqual([]);
    await ann.page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });

    // a figure opens its arithmetic
    await ann.page.getByRole('button', { name: /Contract sum after signing/ }).click();
    await ann.sees('as signed + changes approved + this change');
    await ann.page.keyboard.press('Escape');

    // nothing typed: the form says what is missing; then the name, the consent, and a fresh code since the session is old
    await ann.press('Sign for +$951.37');
    await ann.sees('There is a problem');
    await ann.fill('Type your name to sign', 'Ann Moss');
    await ann.page.getByLabel(/I agree to sign this change electronically/).check();
    await house.sql(`update session set present_at = now() - interval '1 hour'`);
    const before = house.mail.to(lent.ann.email).length;
    await ann.press('Sign for +$951.37');
    await ann.sees('Confirm that it is you');
    await ann.fill('Code from the mail', await ann.code(before));
    await ann.press('Confirm and go on');
    await ann.sees('It holds once Ben Moss has signed too.');

    const ben = await Someone.at(browser, house, url, lent.ben.email, { ...phone, scheme: 'dark' });
    await ben.enter(new URL(link).pathname);
    await ben.fill('Type your name to sign', 'Ben Moss');
    await ben.page.getByLabel(/I agree to sign this change electronically/).check();
    await shoot(ben, 'decide-360-dark');
    await ben.press('Sign for +$951.37');
    await ben.page.getByRole('link', { name: 'The signed paper (PDF)' }).waitFor();
    await ben.page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });
    await shoot(ben, 'signed-360');
    await ben.page.getByRole('img', { name: /Picture 1 of/ }).waitFor();
    await house.mail.wait(lent.lender.email, /Change 1 .* is signed: \+\$951\.37/);

    await builder.goto(`/jobs/${lent.job.id}`);
    await builder.sees('$400,951.37');
    await shoot(builder, 'house-1280');
    // what was sent is not offered again: the next change starts empty
    await builder.goto(`/jobs/${lent.job.id}/changes/new`);
    await builder.page.getByLabel('What it is, in a few words').waitFor();
    expect(await builder.page.getByLabel('What it is, in a few words').inputValue()).toBe('');
    for (const someone of [builder, ann, ben]) expect(someone.troubles).toEqual([]);
  });
});
