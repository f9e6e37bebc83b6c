import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import type { ParsedMail } from 'mailparser';
import { changeAt, attachReview, issueChange, signChange, startChange } from './support/change-builders.ts';
import { lentJob, made, type LentJob } from './support/draw-builders.ts';
import { House } from './support/house.ts';

describe('an answer to a mail about a change', () => {
  let house: House;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    const { url } = await house.web();
    lent = await lentJob(house, url);
  });
  afterAll(() => house.close());

  const answersGoTo = ({ replyTo }: ParsedMail) => replyTo?.value.map(({ address }) => address);

  it('goes from homeowners and lender to who priced it, and from there to the homeowner who acted', async () => {
    const seen = await issueChange(lent, await attachReview(lent, (await startChange(lent, { structural: true })).id));
    const asked = await house.mail.wait(lent.ann.email, /Change 1 .* please decide by/);
    expect(answersGoTo(asked)).toEqual([lent.principal.email]);
    made(await signChange(lent, lent.ann, seen));
    expect(answersGoTo(await house.mail.wait(lent.principal.email, /Change 1 .* has signed/))).toEqual([lent.ann.email]);
    made(await signChange(lent, lent.ben, seen, 'Ben Moss'));
    const signed = await house.mail.wait(lent.lender.email, /Change 1 .* is signed/);
    expect(answersGoTo(signed)).toEqual([lent.principal.email]);
  });

  it('goes to the homeowner who declined, and to who withdrew', async () => {
    const declined = await issueChange(lent, await startChange(lent));
    made(await lent.ben.post(changeAt(lent, declined.id, 'decline'), { reason: 'We would rather keep it as drawn.' }));
    expect(answersGoTo(await house.mail.wait(lent.principal.email, /was declined/))).toEqual([lent.ben.email]);
    expect(answersGoTo(await house.mail.wait(lent.ann.email, /was declined/))).toEqual([lent.principal.email]);
    const withdrawn = await issueChange(lent, await startChange(lent));
    made(await lent.principal.post(changeAt(lent, withdrawn.id, 'withdraw'), { reason: 'Priced by mistake.' }));
    expect(answersGoTo(await house.mail.wait(lent.ann.email, /was withdrawn/))).toEqual([lent.principal.email]);
  });
});
