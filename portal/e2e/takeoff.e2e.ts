import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { lentJob, type LentJob } from '../../api/test/support/draw-builders.ts';
import type { House } from '../../api/test/support/house.ts';
import { desk, phone } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const { SHOTS } = process.env;

describe('a floor, counted as drawn and as proposed', () => {
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

  it('becomes the lines of a change; a missing cost is asked for, a span beyond the screen is said', async () => {
    const builder = await Someone.at(browser, house, url, lent.principal.email, desk);
    await builder.enter(`/jobs/${lent.job.id}/changes/new`);
    await builder.follow('Count a floor first');
    await builder.sees('Nothing differs yet');
    await builder.page.getByRole('group', { name: 'As proposed' }).getByLabel('Joists', { exact: true }).selectOption('2x12');
    // 56 joists, 6 rims and 5 pieces of blocking of 14 ft, of the one size and of the other
    await builder.sees('6 items have no unit cost yet.');
    await builder.sees(/2 in deeper/);
    for (const item of ['Joists', 'Rim', 'Blocking']) {
      await builder.fill(`Unit cost, ${item} 2x12, 14 ft`, '38.25');
      await builder.fill(`Unit cost, ${item} 2x10, 14 ft`, '26.5');
    }
    await builder.page.getByLabel('Clear span', { exact: true }).fill('about 20');
    await builder.sees('Must be a length such as');
    await builder.page.getByLabel('Clear span', { exact: true }).fill("20'");
    await builder.sees(/Beyond the screen: by this method the proposed joist reaches 17 ft/);
    await builder.page.getByLabel('Clear span', { exact: true }).fill('13-4');
    await builder.sees(/The screen is silent\. That does not clear it/);
    await builder.page.mouse.move(2, 2);
    if (SHOTS) await builder.shot(`${SHOTS}/takeoff-1280.png`);
    expect(await builder.axe()).toEqual([]);
    await builder.page.getByRole('button', { name: /Joists 2x12, 14 ft, As proposed: how it is worked out/ }).click();
    await builder.sees('those of the bays that need this stock length');
    await builder.page.keyboard.press('Escape');
    await builder.press('Write these as lines of a change');
    // 67 × (38.25 − 26.50) = 787.25, and the firm's 10 and 10 percent on it
    await builder.page.getByRole('status').filter({ hasText: '+$952.58' }).waitFor();
    expect(await builder.page.getByLabel('It touches the structure').isChecked()).toBe(true);
    await builder.page.goBack();
    await builder.page.setViewportSize(phone);
    await builder.sees('What differs');
    expect(await builder.page.getByLabel('Unit cost, Rim 2x12, 14 ft').inputValue()).toBe('38.25');
    expect(await builder.overflows()).toBe(false);
    if (SHOTS) await builder.shot(`${SHOTS}/takeoff-360.png`);
    expect(await builder.axe()).toEqual([]);
    expect(builder.troubles).toEqual([]);
  });
});
