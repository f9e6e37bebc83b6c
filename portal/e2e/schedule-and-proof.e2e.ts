import type { Browser } from 'playwright-core';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createJob, join, principalWithFirm } from '../../api/test/support/builders.ts';
import type { House } from '../../api/test/support/house.ts';
import { jpeg } from '../../api/test/support/photos.ts';
import { smallSchedule } from '../../api/test/support/schedule-builders.ts';
import { desk, phone } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const sample = (name: string) => path.join(import.meta.dirname, '../../api/test/samples', name);

describe('schedule of values, photos and proof in a browser', () => {
  let stage: Stage;
  let house: House;
  let url: string;
  let browser: Browser;

  beforeAll(async () => {
    stage = await openStage();
    ({ house, url, browser } = stage);
  });
  afterAll(() => stage.close());

  it('imports a schedule that lacked a line, put right by keyboard in the sheet', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId, { contractSumCents: 48_650_000 });
    const builder = await Someone.at(browser, house, url, principal.email, desk);
    await builder.enter(`/jobs/${job.id}`);
    await builder.follow('Import the schedule of values');
    await builder.page.setInputFiles('input[type=file]', sample('schedule-one-line-short.xlsx'));
    await builder.sees('49 lines read from schedule-one-line-short.xlsx');
    await builder.sees('The total says $486,500.00, but the lines above it add up to $481,345.00: $5,155.00 less.');
    expect(await builder.axe()).toEqual([]);

    await builder.press('Import 49 lines');
    await builder.sees('the contract sum is $486,500.00: $5,155.00 missing.');
    await builder.press('Add a line for $5,155.00');
    await builder.sees('Enter the description.');
    // from the first cell to the last line by keyboard alone
    const { keyboard } = builder.page;
    await builder.page.locator('[data-cell="0:0"]').focus();
    for (const key of ['Control+End', 'ArrowLeft', 'ArrowLeft', 'ArrowLeft', 'Enter']) await keyboard.press(key);
    await keyboard.type('Deck and steps');
    await keyboard.press('Tab');
    expect(await builder.page.getByRole('textbox', { name: 'Scheduled value, line 50' }).inputValue()).toBe('$5,155.00');
    await keyboard.press('Escape');
    // what was put right survives a reload
    await builder.page.reload();
    await builder.sees('Deck and steps');
    await builder.sees('The lines add up to the contract sum.');
    await builder.press('Import 50 lines');
    await builder.sees('The schedule of values is imported.');
    await builder.sees('Deck and steps');
    await builder.page.getByRole('button', { name: /Schedule of values: how it is worked out/ }).click();
    await builder.sees('sum of its phases');
    expect(builder.troubles).toEqual([]);
  });

  it('takes photos from a phone, claims with them, and has them seen and proven from outside', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    await smallSchedule(principal, job.id);
    const inspector = await join(principal, job.id, 'inspector', 'Ines Stone');
    const site = await Someone.at(browser, house, url, principal.email, phone);
    await site.enter(`/jobs/${job.id}/site`);
    await site.sees('Choose what you photograph.');
    expect([await site.axe(), await site.overflows()]).toEqual([[], false]);
    await site.page.locator('main').getByRole('link', { name: /Framing/ }).click();
    await site.fill('What they show', 'Joists, north side');
    const pictures = await Promise.all([1, 2, 3].map(async (scene) => ({ name: `IMG_${scene}.jpg`, mimeType: 'image/jpeg', buffer: await jpeg({ scene, width: 2_000, height: 1_500, taken: '2026:11:12 09:30:15', offset: '-05:00' }) })));
    await site.page.locator('input[capture]').setInputFiles([...pictures, { name: 'notes.jpg', mimeType: 'image/jpeg', buffer: Buffer.from('no picture') }]);
    await site.sees('3 of 4 sent');
    await site.sees('Not accepted: This is not a photo.');
    expect([await site.axe(), await site.overflows()]).toEqual([[], false]);

    // a photo that finds no network waits, and goes when it is tried again
    await site.context.setOffline(true);
    await site.page.locator('input[capture]').setInputFiles({ name: 'IMG_9.jpg', mimeType: 'image/jpeg', buffer: await jpeg({ scene: 9, width: 800, height: 600 }) });
    await site.sees('Not sent: No answer came.');
    await site.context.setOffline(false);
    await site.sees('4 of 5 sent');

    await site.follow('See the milestone, or claim it');
    await site.press('Begin work on it');
    await site.fill('Note for those who look', 'Hung and blocked.');
    await site.press('Claim as done');
    await site.sees('Claimed. Those who look at it are asked by mail.');

    const mail = await house.mail.wait(inspector.email, /Framing at 9 Larkspur Court is claimed/);
    const link = /https?:\/\/\S+\/milestones\/\S+/.exec(mail.text ?? '')?.[0] ?? '';
    const outside = await Someone.at(browser, house, url, inspector.email, desk);
    await outside.enter(new URL(link).pathname);
    await outside.sees('Say what you saw');
    const photo = outside.page.locator('main').getByRole('button', { name: /Joists, north side, taken November 12, 2026/ });
    await photo.first().waitFor();
    expect(await photo.count()).toBe(3);
    // away from the pole, which shows a card where the mouse is
    await outside.page.mouse.move(1_200, 500);
    expect(await outside.axe()).toEqual([]);
    await photo.first().click();
    await outside.sees(/SHA-256 [0-9a-f]{64}/);
    await outside.page.keyboard.press('Escape');
    await outside.page.getByRole('combobox', { name: 'What you saw' }).selectOption('failed');
    await outside.press('Refuse the claim');
    await outside.sees('Say what is missing or wrong.');
    await outside.page.getByRole('combobox', { name: 'What you saw' }).selectOption('passed');
    await outside.press('Confirm that it is done');
    await outside.sees('Recorded. The firm is told by mail.');
    await outside.page.locator('main').getByText('Proven', { exact: true }).first().waitFor();
    await house.mail.wait(principal.email, /^Framing at 9 Larkspur Court is proven$/);
    for (const someone of [site, outside]) expect(someone.troubles).toEqual([]);
  });
});
