import type { Browser } from 'playwright-core';
import { writeFileSync } from 'node:fs';
import path from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { ledgerState } from '../../api/test/support/draw-builders.ts';
import { House } from '../../api/test/support/house.ts';
import { jpeg } from '../../api/test/support/photos.ts';
import { StripeStandIn } from '../../api/test/support/stripe-stand-in.ts';
import { pdf } from '../../api/test/support/uploads.ts';
import { desk, openBrowser, phone, type Screen } from './support/browser.ts';
import { Someone } from './support/someone.ts';

const sample = (name: string) => path.join(import.meta.dirname, '../../api/test/samples', name);
const linkIn = (text: string | undefined, what: string): string => new URL(new RegExp(`https?://\\S+${what}\\S+`).exec(text ?? '')?.[0] ?? '').pathname;

/** One job from an empty database to a paid draw, every act through a page, with what commonly goes wrong on the way; each test goes on where the last one ended. */
describe('a first job, from contract to paid draw', () => {
  let house: House;
  let stripe: StripeStandIn;
  let url: string;
  let browser: Browser;
  let job: string;
  let draw: string;
  const cast = {} as Record<'hal' | 'mia' | 'bea' | 'sam' | 'ida' | 'tom' | 'vera' | 'ivo', Someone>;

  beforeAll(async () => {
    house = await House.open({ PORTAL_DIST: path.join(import.meta.dirname, '../dist') });
    stripe = await StripeStandIn.for(house);
    ({ url } = await house.web());
    await house.worker({ env: { PUBLIC_URL: url } });
    await stripe.start(url);
    browser = await openBrowser();
  });
  // what everybody had before them when something failed
  afterEach(async ({ task }) => {
    const { SHOTS } = process.env;
    if (task.result?.state === 'fail' && SHOTS) for (const [name, someone] of Object.entries(cast)) await someone.shot(path.join(SHOTS, `failed-${name}.png`));
  });
  afterAll(async () => {
    await browser.close();
    await house.close();
    await stripe.close();
  });

  const enter = async (email: string, screen: Screen, to: string, name?: string): Promise<Someone> => {
    await house.sql('delete from rate_limit');
    const someone = await Someone.at(browser, house, url, email, screen);
    // who signs up does it on the page
    await (name ? someone.signIn(to, name) : someone.enter(to));
    return someone;
  };
  const clean = () => {
    for (const [name, someone] of Object.entries(cast)) expect([name, someone.troubles]).toEqual([name, []]);
  };

  it('1: the principal starts a firm, sets up payments, creates the job with its terms and its loan, and invites everybody', async () => {
    const hal = (cast.hal = await enter('hal@oakline.example', desk, '/jobs', 'Hal Orr'));
    await hal.follow('Start your firm');
    await hal.fill('Name of the firm', 'Oakline Builders');
    await hal.press('Start the firm');
    for (const [label, text] of [['Name of the job', '14 Sedge Way'], ['Street', '14 Sedge Way'], ['City', 'Maple Glen'], ['State', 'OH'], ['ZIP code', '45011'], ['Contract sum as signed', '486,500'], ['Signed on', 'Sept 1, 2026'], ['Work starts', '9/15/2026'], ['Complete by', '2027-06-30'], ['Deposit', '20,000'], ['Retainage', '5']] as const) {
      await hal.page.getByLabel(label, { exact: true }).fill(text);
    }
    await hal.page.getByLabel('Days of the contract are').selectOption('calendar');
    await hal.press('Create the job');
    await hal.sees('The schedule of values comes first');
    job = new URL(hal.page.url()).pathname;

    await hal.goto(`${job}/loan`);
    for (const [label, text] of [['Lender', 'Fallbrook Bank'], ['Loan', '400,000'], ['Of it for construction', '380,000'], ['The homeowner’s money first', '30,000'], ['Changes need the lender’s consent above', '5,000']] as const) {
      await hal.page.getByLabel(label, { exact: true }).fill(text);
    }
    await hal.press('Save the terms');
    await hal.sees('The terms are saved.');

    await hal.goto(`${job}/people`);
    for (const [name, email, role] of [['Ida Brook', 'ida@brook.example', 'homeowner'], ['Tom Brook', 'tom@brook.example', 'homeowner'], ['Vera Lund', 'vera@fallbrook.example', 'lender'], ['Ivo Stark', 'ivo@stark.example', 'inspector']] as const) {
      await hal.page.getByLabel('Name', { exact: true }).fill(name);
      await hal.fill('Mail address', email);
      await hal.page.getByLabel('As', { exact: true }).selectOption(role);
      await hal.press('Send the invitation');
      await hal.page.getByText(email, { exact: true }).waitFor();
      await house.mail.wait(email, /14 Sedge Way/);
    }
    await menu(hal, 'Oakline Builders, principal');
    await hal.sees('Who belongs to the firm');
    for (const [name, role] of [['Mia Holt', 'manager'], ['Bea Fenn', 'books'], ['Sam Reed', 'site']] as const) {
      await hal.page.getByLabel('Name', { exact: true }).fill(name);
      await hal.fill('Mail address', `${name.slice(0, 3).toLowerCase()}@oakline.example`);
      await hal.page.getByLabel('As', { exact: true }).selectOption(role);
      await hal.press('Send the invitation');
      await hal.page.getByText(`${name.slice(0, 3).toLowerCase()}@oakline.example`, { exact: true }).waitFor();
    }

    await hal.goto('/payouts');
    await hal.press('Set up payments');
    await hal.page.getByRole('link', { name: 'Go on at the payment service' }).click();
    await hal.page.waitForURL(/\/onboard\//);
    await hal.page.getByRole('button').first().click();
    await hal.page.waitForURL(/\/payouts/);
    await hal.page.getByText('Ready', { exact: true }).waitFor({ timeout: 40_000 });

    // each comes by the link in the invitation, and proves the address by a code
    for (const [as, email, screen] of [['ida', 'ida@brook.example', phone], ['tom', 'tom@brook.example', desk], ['vera', 'vera@fallbrook.example', desk], ['ivo', 'ivo@stark.example', phone]] as const) {
      const invitation = await house.mail.wait(email, /invites you to 14 Sedge Way/);
      cast[as] = await enter(email, screen, linkIn(invitation.text, '/jobs/'));
      // an inspector is shown the work, not the money
      await cast[as].sees(as === 'ivo' ? '14 Sedge Way' : '$486,500.00');
    }
    clean();
  });

  it('2: a file that is a line short names what is wrong and writes nothing; the right one is imported', async () => {
    const { hal } = cast;
    await hal.goto(`${job}/schedule/import`);
    await hal.page.setInputFiles('input[type=file]', sample('schedule-one-line-short.xlsx'));
    await hal.sees('$5,155.00 less.');
    await hal.press('Import 49 lines');
    await hal.sees('There is a problem');
    expect(await house.sql('select count(*)::int as n from schedule_line')).toEqual([{ n: 0 }]);
    await hal.page.setInputFiles('input[type=file]', sample('schedule-quarry.csv'));
    await hal.press('Import 50 lines');
    await hal.sees('The schedule of values is imported.');
    await hal.sees('$486,500.00');
    await hal.goto(`${job}/money`);
    await hal.page.getByLabel('Sum', { exact: true }).fill('20,000');
    await hal.page.getByLabel('Received on', { exact: true }).fill('9/10/2026');
    await hal.fill('Reference', 'Check 1001');
    await hal.press('Record it as received');
    await hal.sees('Check 1001');
    clean();
  });

  it('3: site photographs from a phone and claims; the inspector says what was seen', async () => {
    const sam = (cast.sam = await enter('sam@oakline.example', phone, `${job}/site`));
    await sam.page.locator('main').getByRole('link', { name: /Site and foundation/ }).click();
    const pictures = await Promise.all([1, 2, 3].map(async (scene) => ({ name: `IMG_${scene}.jpg`, mimeType: 'image/jpeg', buffer: await jpeg({ scene, width: 1_600, height: 1_200, taken: '2026:11:12 09:30:15', offset: '-05:00' }) })));
    await sam.page.locator('input[capture]').setInputFiles(pictures);
    await sam.sees('3 of 3 sent');
    await sam.follow('See the milestone, or claim it');
    await sam.press('Begin work on it');
    await sam.press('Claim as done');
    await sam.sees('Claimed.');
    const mail = await house.mail.wait('ivo@stark.example', /Site and foundation at 14 Sedge Way is claimed/);
    const { ivo } = cast;
    await ivo.goto(linkIn(mail.text, '/milestones/'));
    await ivo.sees('Say what you saw');
    expect(await ivo.page.locator('main').getByRole('button', { name: /taken November 12, 2026/ }).count()).toBe(3);
    await ivo.press('Confirm that it is done');
    await ivo.page.locator('main').getByText('Proven', { exact: true }).first().waitFor();
    clean();
  });

  it('4: a structural change is priced and reviewed; declined; revised for less; signed by both, once each', async () => {
    const { hal } = cast;
    await menu(hal, 'How changes are priced');
    await hal.page.getByLabel('Sales tax', { exact: true }).fill('7');
    await hal.press('Keep these terms');
    await hal.sees('The terms hold for what is priced from now on.');
    const mia = (cast.mia = await enter('mia@oakline.example', desk, `${job}/changes/new`));
    await mia.fill('What it is, in a few words', 'Deeper joists over the workshop');
    await mia.fill('Why, in plain words', 'The workshop floor will carry a heavy bench.');
    await mia.page.getByLabel('It touches the structure').check();
    await mia.page.getByLabel('It belongs to').selectOption({ label: 'Floor and frame' });
    await mia.fill('More calendar days', '3');
    await mia.page.getByLabel('The price holds until', { exact: true }).fill('March 19, 2099');
    await mia.page.getByRole('grid', { name: 'Lines of the change' }).getByRole('gridcell').first().click();
    await mia.page.evaluate(
      (text) => {
        const data = new DataTransfer();
        data.setData('text/plain', text);
        document.activeElement?.dispatchEvent(new ClipboardEvent('paste', { clipboardData: data, bubbles: true, cancelable: true }));
      },
      ['Floor joists 2×12, 14 ft\tadded\tmaterial\t22\tea\t38.25\tyes', 'Floor joists 2×10, 14 ft\ttaken out\tmaterial\t22\tea\t26.50\tyes', 'Carpenter\tadded\tlabor\t8\th\t60\tno'].join('\n'),
    );
    // materials 22 × (38.25 − 26.50) = 258.50 and their tax 18.10, labor 480.00; overhead 75.66 and profit 83.23 of 10 % each, one on the other
    await mia.page.getByRole('status').filter({ hasText: '+$915.49' }).waitFor();
    await mia.press('Keep as draft');
    await mia.press(/^Send out for/);
    await mia.sees('A structural change needs its review');
    await attachReview(mia);
    await mia.press('Send out for +$915.49');
    await mia.sees('Waits for a decision');

    const mail = await house.mail.wait('ida@brook.example', /Change 1 for 14 Sedge Way: \+\$915\.49/);
    const { ida, tom } = cast;
    await ida.goto(linkIn(mail.text, '/changes/'));
    for (const words of ['The workshop floor will carry a heavy bench.', '$487,415.49', 'July 3, 2027', 'P. Wren, PE']) await ida.sees(words);
    await ida.press('Decline, and say why');
    await ida.fill('Why', 'Too much for a bench.');
    await ida.page.getByRole('button', { name: /Decline/ }).last().click();
    await ida.sees('Declined');
    await house.mail.wait('mia@oakline.example', /Change 1 .* was declined/);

    await revise(mia, async () => {
      await mia.page.getByRole('gridcell', { name: '8', exact: true }).dblclick();
      await mia.page.keyboard.press('Control+A');
      await mia.page.keyboard.type('6');
      await mia.page.keyboard.press('Enter');
    }, '+$770.29');
    const lower = linkIn((await house.mail.wait('ida@brook.example', /Change 1A for 14 Sedge Way: \+\$770\.29/)).text, '/changes/');
    await ida.goto(lower);
    await agree(ida, 'Ida Brook');
    // the mark-up is altered while she has it open: what she saw can't be signed any more
    await revise(mia, async () => {
      await mia.page.getByLabel("Other terms than the firm's").check();
      await mia.page.getByLabel('Marked up by').selectOption('margin');
      await mia.page.getByLabel('Margin', { exact: true }).fill('10');
      await mia.fill('Why they differ', 'Agreed on the phone.');
    }, '+$707.33');
    await ida.press('Sign for +$770.29');
    await ida.sees('has taken its place: +$707.33 instead of +$770.29');
    await ida.follow(/Revision B has taken its place/);
    await agree(ida, 'Ida Brook');
    await ida.press('Sign for +$707.33');
    await ida.sees('It holds once Tom Brook has signed too.');

    await tom.goto(new URL(ida.page.url()).pathname);
    const tab = await tom.context.newPage();
    await tab.goto(tom.page.url());
    for (const page of [tab, tom.page]) {
      await page.getByLabel('Type your name to sign').fill('Tom Brook');
      await page.getByLabel(/I agree to sign this change electronically/).check();
    }
    await Promise.all([tab, tom.page].map((page) => page.getByRole('button', { name: 'Sign for +$707.33' }).click()));
    await tom.page.getByRole('link', { name: 'The signed paper (PDF)' }).waitFor();
    await tab.close();
    expect(await house.sql('select count(*)::int as n, count(distinct person_id)::int as people from change_signature')).toEqual([{ n: 2, people: 2 }]);
    const signed = await house.mail.wait('ida@brook.example', /Change 1B .* is signed: \+\$707\.33/);
    expect(signed.attachments.map(({ contentType }) => contentType)).toEqual(['application/pdf']);
    await tom.goto(`${job}/schedule`);
    await tom.sees('$487,207.33');
    clean();
  });

  it('5: a draw is drafted from what is proven, adjusted, sent with photos; approved by both, funded; a debit fails, the next one settles, told twice and late', async () => {
    const { ida, tom, vera } = cast;
    const bea = (cast.bea = await enter('bea@oakline.example', desk, `${job}/draws`));
    await bea.page.getByLabel('Work through', { exact: true }).fill('11/30/2026');
    await bea.press('Draft the next draw');
    const sheet = bea.page.getByRole('grid', { name: 'Draw 1' });
    for (const [line, percent] of [['Permits and fees', '100'], ['Supervision', '25'], ['Temporary power', '0'], ['Dumpsters', '0'], ['Contingency', '0']] as const) {
      await sheet.getByRole('row', { name: new RegExp(line) }).getByRole('gridcell').nth(2).click();
      await bea.page.keyboard.type(percent);
      await bea.page.keyboard.press('Enter');
    }
    // 65,140.00 proven + 8,000.00 + 3,745.00 = 76,885.00; less 5 % retainage 3,844.25, less the deposit's share 20,000 × 76,885 ÷ 487,207.33 = 3,156.15
    await bea.sees('$69,884.60');
    await bea.press('Choose all');
    await bea.press('Attach 3 photos');
    await bea.sees('The photos are attached.');
    await bea.press('Send draw 1');
    await bea.sees('To approve');
    draw = new URL(bea.page.url()).pathname;

    // the homeowner's own money first, 30,000.00, which the deposit is a part of
    await house.mail.wait('ida@brook.example', /Draw 1/);
    for (const [someone, next] of [[ida, 'Waits for Tom Brook.'], [tom, 'Pay your part']] as const) {
      await someone.goto(draw);
      await someone.press(/^Approve draw 1: you pay \$30,000\.00/);
      await someone.sees(next);
    }
    await vera.goto('/lending');
    await vera.follow('Look at the proof');
    await vera.press('Record the inspection');
    await vera.press('Allow these lines');
    await vera.page.getByLabel('Reference').fill('FED 2211');
    await vera.press('Record $39,884.60 as sent');
    await vera.sees('the builder has it');

    const failing = await pay(ida, 'Bank debit that fails');
    await stripe.control(`payments/${failing}/fail`, { code: 'R01' });
    await ida.page.getByRole('heading', { name: 'Your payment did not go through' }).waitFor({ timeout: 30_000 });
    await ida.follow('Back to Draw 1');
    await ida.sees('The last try did not go through');
    await stripe.control('rules', { type: '*', action: 'hold' });
    const settling = await pay(ida, 'Bank debit that settles later');
    await stripe.control(`payments/${settling}/settle`);
    await stripe.control('rules', {}, 'DELETE');
    await stripe.control('deliveries/release', { order: 'reversed' });
    for (const { id } of (await stripe.deliveries()).slice(-6)) await stripe.control(`deliveries/${id}/send`, { times: 2 });
    await ida.page.getByRole('heading', { name: 'Your payment has arrived' }).waitFor({ timeout: 30_000 });
    const receipts = () => house.mail.to('ida@brook.example').filter(({ subject }) => /^Receipt: \$30,000\.00 for Draw 1/.test(subject ?? ''));
    await house.mail.wait('ida@brook.example', /^Receipt: \$30,000\.00 for Draw 1/);
    expect(receipts().length).toBe(1);
    expect(await ledgerState(house, job.split('/')[2]!)).toMatchObject({ sum: 0, owed: 0, byDraws: 0 });
    clean();
  });

  it('6: everybody reads the same figures to the cent, and nothing waits in the lender’s queue', async () => {
    const { hal, bea, ida, tom, vera } = cast;
    for (const someone of [hal, bea, ida, tom, vera]) {
      await someone.goto(draw);
      await someone.page.locator('main').getByText('Paid', { exact: true }).first().waitFor();
      const said = await someone.text();
      expect([someone.email, ['$69,884.60', '$30,000.00', '$39,884.60'].filter((sum) => !said.includes(sum))]).toEqual([someone.email, []]);
      await someone.goto(`${job}/money`);
      await someone.sees('Billed to date');
      const money = await someone.text();
      expect([someone.email, ['$487,207.33', '$76,885.00', '$69,884.60', '$3,844.25'].filter((sum) => !money.includes(sum))]).toEqual([someone.email, []]);
      await someone.goto(job);
      await someone.sees('$487,207.33');
    }
    await vera.goto('/lending');
    await vera.sees('No draw waits for you.');
    // what is still to be paid is what the ledger leaves: left to bill less the deposit's rest
    await ida.goto(`${job}/money`);
    await ida.page.getByRole('heading', { name: 'Cash ahead' }).waitFor();
    await ida.sees('$397,322.73');
    // the record is computed anew in the reader's own browser
    await ida.goto(`${job}/record`);
    await ida.press('Check the record');
    await ida.sees(/^All \d+ entries hold\. The last hash is [0-9a-f]{64}\.$/);
    expect([await ida.axe(), await ida.overflows()]).toEqual([[], false]);
    // the signed paper printed where the record stood; another hash is found
    const [printed] = await house.sql<{ seq: string; hash: string }>(`select seq::text, hash from record_entry where chain = 'shared' and data->>'act' = 'change.signed' order by record_entry.seq desc limit 1`);
    await ida.page.getByText('Compare with a paper').click();
    await ida.fill('Entry printed there', printed?.seq ?? '');
    await ida.fill('Hash printed there', 'f'.repeat(64));
    await ida.press('Check the record');
    await ida.sees(/is not the one that was printed in the paper/);
    await ida.fill('Hash printed there', printed?.hash.replace(/(.{16})/g, '$1 ') ?? '');
    await ida.press('Check the record');
    await ida.sees(/It is the record that the paper names\.$/);
    clean();
  });

  const menu = async (who: Someone, item: string) => {
    await who.press(/^Hal Orr/);
    await who.follow(item);
  };
  const agree = async (who: Someone, name: string) => {
    await who.fill('Type your name to sign', name);
    await who.page.getByLabel(/I agree to sign this change electronically/).check();
  };
  /** The engineered sheet of the supplier, with name and date. */
  const attachReview = async (who: Someone) => {
    const sheet = path.join(house.env['FILES_DIR'] ?? '', '../joists.pdf');
    writeFileSync(sheet, pdf());
    await who.page.locator('input[type=file]').setInputFiles(sheet);
    await who.sees('The file has arrived.');
    await who.fill('Who reviewed it', 'P. Wren, PE');
    await who.page.getByLabel('Reviewed on', { exact: true }).fill('11/20/2026');
    await who.press('Attach the review');
    await who.page.getByRole('link', { name: 'joists.pdf' }).waitFor();
  };
  /** Revises the change that is open, with what differs, and sends it out for the new price. */
  const revise = async (who: Someone, differ: () => Promise<void>, price: string) => {
    await who.page.reload();
    await who.follow('Make a revision');
    await differ();
    await who.page.getByRole('status').filter({ hasText: price }).waitFor();
    await who.press('Make the revision');
    await who.sees('Not reviewed yet');
    await attachReview(who);
    await who.press(`Send out for ${price}`);
    await who.sees('Waits for a decision');
  };
  /** Through the payment page; gives the session back, by which the stand-in is told what the bank does. */
  const pay = async (who: Someone, outcome: string): Promise<string> => {
    await who.goto(draw);
    await who.press('Pay $30,000.00');
    await who.page.waitForURL(/\/pay\/cs_/);
    const session = /cs_\w+/.exec(who.page.url())?.[0] ?? '';
    await who.page.getByLabel(outcome).check();
    await who.page.getByLabel('When does a bank debit settle or fail?').selectOption('-1');
    await who.page.getByRole('button', { name: 'Pay $30,000.00' }).click();
    await who.page.waitForURL(/\/payments\//);
    return session;
  };
});
