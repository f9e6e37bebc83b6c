import type { Browser } from 'playwright-core';
import { writeFileSync } from 'node:fs';
import path from 'node:path';
import { v7 } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Change } from '@tallypole/shared/schemas/changes';
import { changeAt, changeDraft, issueChange, startChange } from '../../api/test/support/change-builders.ts';
import { join } from '../../api/test/support/builders.ts';
import { lentJob, made, type LentJob } from '../../api/test/support/draw-builders.ts';
import type { House } from '../../api/test/support/house.ts';
import { pdf } from '../../api/test/support/uploads.ts';
import { desk, phone } from './support/browser.ts';
import { Someone } from './support/someone.ts';
import { openStage, type Stage } from './support/stage.ts';

const shots = process.env['SHOTS'];

describe('what people answer to a change', () => {
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

  const pageOf = (change: Change) => `/jobs/${changeAt(lent, change.id).split('/jobs/')[1] ?? ''}`;
  const agree = async (who: Someone, name: string) => {
    await who.fill('Type your name to sign', name);
    await who.page.getByLabel(/I agree to sign this change electronically/).check();
  };

  it('no, with a reason, from a phone and by keyboard; the firm reads why', async () => {
    const change = await issueChange(lent, await startChange(lent));
    const ann = await Someone.at(browser, house, url, lent.ann.email, phone);
    await ann.enter(pageOf(change));
    await ann.page.getByRole('button', { name: 'Decline, and say why' }).focus();
    await ann.page.keyboard.press('Enter');
    await ann.page.getByLabel('Why').focus();
    await ann.page.keyboard.type('We would rather keep the money.');
    await ann.page.keyboard.press('Tab');
    await ann.page.keyboard.press('Enter');
    await ann.sees('Declined');
    expect(await ann.page.getByRole('button', { name: /^Sign for/ }).count()).toBe(0);
    expect((await house.mail.wait(lent.principal.email, /Change 1 .* was declined/)).text).toContain('We would rather keep the money.');
    const builder = await Someone.at(browser, house, url, lent.principal.email, desk);
    await builder.enter(pageOf(change));
    await builder.sees('We would rather keep the money.');
    await builder.sees('Make a revision');
    for (const someone of [ann, builder]) expect(someone.troubles).toEqual([]);
  });

  it('yes, to a price that was altered meanwhile: refused, and led to what holds now', async () => {
    const change = await issueChange(lent, await startChange(lent));
    const ann = await Someone.at(browser, house, url, lent.ann.email, phone);
    await ann.enter(pageOf(change));
    await agree(ann, 'Ann Moss');
    const terms = { mode: 'margin', marginRate: 2_000, laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'keep', flatFeeCents: 0, insuranceRate: 0 } as const;
    const revision = made<Change>(await lent.principal.post(changeAt(lent, change.id, 'revisions'), changeDraft(lent, { terms, termsReason: 'Priced by margin.' })));
    await issueChange(lent, revision);
    await ann.press('Sign for +$951.37');
    await ann.sees('has taken its place: +$982.81 instead of +$951.37');
    await ann.sees('Replaced by a revision');
    expect(await ann.page.getByRole('button', { name: /^Sign for/ }).count()).toBe(0);
    if (shots) await ann.shot(`${shots}/altered-360.png`);
    await ann.follow(/Revision A has taken its place/);
    await ann.page.getByRole('button', { name: 'Sign for +$982.81' }).waitFor();
    expect(await ann.axe()).toEqual([]);
    expect(ann.troubles).toEqual([]);
  });

  it('yes, in two tabs with the same form: signed once', async () => {
    const change = await issueChange(lent, await startChange(lent));
    const ben = await Someone.at(browser, house, url, lent.ben.email, desk);
    await ben.enter(pageOf(change));
    await agree(ben, 'Ben Moss');
    const tab = await ben.context.newPage();
    await tab.goto(`${url}${pageOf(change)}`);
    await tab.getByLabel('Type your name to sign').fill('Ben Moss');
    await tab.getByLabel(/I agree to sign this change electronically/).check();
    await ben.press('Sign for +$951.37');
    await ben.sees('You have signed. It holds once Ann Moss has signed too.');
    await tab.getByRole('button', { name: 'Sign for +$951.37' }).click();
    await tab.getByText('You have signed').first().waitFor();
    expect(await house.sql('select count(*)::int as n from change_signature where change_id = $1', [change.id])).toEqual([{ n: 1 }]);
    if (shots) await ben.shot(`${shots}/signed-once-1280.png`);
    expect(ben.troubles).toEqual([]);
  });

  it('the site learns what to build, without a price, on a phone', async () => {
    const email = `lou-${v7()}@firm.example`;
    made(await lent.principal.post(`/firms/${lent.firmId}/invitations`, { id: v7(), email, name: 'Lou Ferris', role: 'site' }));
    const lou = await Someone.at(browser, house, url, email, phone);
    await lou.enter(`/jobs/${lent.job.id}/changes`);
    await lou.sees('Refused: build as drawn');
    await lou.sees('Not yet');
    if (shots) await lou.shot(`${shots}/site-log-360.png`);
    await lou.page.getByRole('link', { name: /^Change 3/ }).click();
    await lou.sees('Floor joists 2×12, 16 ft');
    await lou.sees('28 ea');
    expect(await lou.text()).not.toContain('$');
    expect(await lou.overflows()).toBe(false);
    expect(await lou.axe()).toEqual([]);
    if (shots) await lou.shot(`${shots}/site-change-360.png`);
    expect(lou.troubles).toEqual([]);
  });

  it('the designer is asked, reads what is built without a price, and attaches the review', async () => {
    const designer = await join(lent.principal, lent.job.id, 'designer', 'Ada Finch');
    const change = await startChange(lent, { structural: true });
    const builder = await Someone.at(browser, house, url, lent.principal.email, desk);
    await builder.enter(pageOf(change));
    await builder.press('Ask for a review');
    await builder.sees('In review');
    const mail = await house.mail.wait(designer.email, /touches the structure: please review it/);
    const ada = await Someone.at(browser, house, url, designer.email, desk);
    await ada.enter(new URL(/https?:\/\/\S+changes\S+/.exec(mail.text ?? '')?.[0] ?? '').pathname);
    await ada.sees('28 ea');
    expect(await ada.text()).not.toContain('$');
    const letter = path.join(house.env['FILES_DIR'] ?? '', '../letter.pdf');
    writeFileSync(letter, pdf());
    await ada.page.locator('input[type=file]').setInputFiles(letter);
    await ada.sees('The file has arrived.');
    await ada.fill('Who reviewed it', 'Ada Finch, AIA');
    await ada.page.getByLabel('Reviewed on', { exact: true }).fill('11/20/2026');
    // the pointer rests nowhere, so that no band of the pole stands open
    await ada.page.mouse.move(0, 0);
    if (shots) await ada.shot(`${shots}/designer-1280.png`);
    expect(await ada.axe()).toEqual([]);
    await ada.press('Attach the review');
    await ada.page.getByRole('link', { name: 'letter.pdf' }).waitFor();
    await builder.page.reload();
    await builder.press('Send out for +$951.37');
    await builder.sees('Waits for a decision');
    for (const someone of [builder, ada]) expect(someone.troubles).toEqual([]);
  });

  it('the firm sets how it prices, and the next change is priced by it', async () => {
    const builder = await Someone.at(browser, house, url, lent.principal.email, desk);
    await builder.enter(`/firms/${lent.firmId}/pricing`);
    await builder.page.getByLabel('Marked up by').selectOption('margin');
    await builder.fill('Margin', '100');
    await builder.press('Keep these terms');
    await builder.sees('There is a problem');
    await builder.fill('Margin', '20');
    if (shots) await builder.shot(`${shots}/pricing-1280.png`);
    expect(await builder.axe()).toEqual([]);
    await builder.press('Keep these terms');
    await builder.sees('The terms hold for what is priced from now on.');
    await builder.page.getByLabel('Marked up by').selectOption('tiers');
    await builder.page.getByRole('button', { name: 'Add a tier' }).first().click();
    expect(await builder.axe()).toEqual([]);
    await builder.goto(`/jobs/${lent.job.id}/changes/new`);
    await builder.page.getByLabel("Other terms than the firm's").check();
    expect(await builder.page.getByLabel('Marked up by').inputValue()).toBe('margin');
    expect(builder.troubles).toEqual([]);
  });
});
