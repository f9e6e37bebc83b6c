import { afterAll, beforeAll, beforeEach, describe, expect, it } from '@jest/globals';
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import request from 'supertest';
import { v7 } from 'uuid';
import type { Change } from '@tallypole/shared/schemas/changes';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Photo } from '@tallypole/shared/schemas/photos';
import { principalWithFirm } from './support/builders.ts';
import { changeAt, changeDraft, costLine, issueChange, signature, signChange, startChange, withPaper } from './support/change-builders.ts';
import { approve, drawAt, lentJob, loanInput, made, payDeposit, prove, sentDraw, type LentJob } from './support/draw-builders.ts';
import { House, until } from './support/house.ts';

describe('what a change does', () => {
  let house: House;
  let url: string;
  let firm: Awaited<ReturnType<typeof principalWithFirm>>;
  let lent: LentJob;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    ({ url } = await house.web());
    firm = await principalWithFirm(house, url);
  });
  afterAll(() => house.close());
  beforeEach(async () => {
    lent = await lentJob(house, url, { firm });
  });

  const today = () => new Intl.DateTimeFormat('en-CA', { timeZone: 'America/New_York' }).format(new Date());
  const signBoth = async (seen: Change) => {
    made(await signChange(lent, lent.ann, seen));
    return made<Change>(await signChange(lent, lent.ben, seen, 'Ben Moss'));
  };
  const draft = async () => made<Draw>(await lent.principal.post(`/jobs/${lent.job.id}/draws`, { id: v7(), throughOn: today() }));
  const sums = ({ summary, homeownerCents, loanCents }: Draw) => ({ dueNowCents: summary.dueNowCents, homeownerCents, loanCents });

  it('to the next draw is what the next draw then asks, from whom, to the cent', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    const seen = await issueChange(lent, await startChange(lent));
    const shown = seen.effect?.nextDraw;
    expect(seen.steps?.nextDraw?.result).toEqual({ kind: 'money', cents: shown?.after.dueNowCents });
    expect(shown?.after.dueNowCents).toBeGreaterThan(shown?.before.dueNowCents ?? Infinity);
    const mail = await house.mail.wait(lent.ann.email, /please decide by/);
    expect(mail.text).toContain('Draw once "Framing" is proven: $');

    await prove(lent, 'Framing');
    const without = await draft();
    expect(sums(without)).toEqual(shown?.before);
    made(await lent.principal.post(drawAt(lent, without.id, 'void'), { reason: 'Drafted again with the change.' }));
    await signBoth(seen);
    expect(sums(await draft())).toEqual(shown?.after);
  });

  it('is counted from a draw that is out, as if it were approved as asked', async () => {
    await payDeposit(lent);
    await prove(lent, 'Foundation');
    const { id } = await sentDraw(lent);
    const { effect } = await issueChange(lent, await startChange(lent));
    await approve(lent, lent.ann, id);
    await approve(lent, lent.ben, id);
    await prove(lent, 'Framing');
    expect(sums(await draft())).toEqual(effect?.nextDraw?.before);
  });

  it('can take away: less in the next draw, and nobody is asked for the difference', async () => {
    const seen = await issueChange(lent, await startChange(lent, { lines: [costLine({ effect: 'deduct', quantity: '10', unitCost: '100' })], days: 0 }));
    expect(seen.effect).toMatchObject({ funding: 'less_to_pay', after: { contractSumCents: 39_900_000 } });
    expect(seen.effect?.nextDraw?.after.dueNowCents).toBeLessThanOrEqual(seen.effect?.nextDraw?.before.dueNowCents ?? 0);
  });

  it('stays readable once signed, as it was agreed, whatever happens to the job afterwards', async () => {
    const first = await issueChange(lent, await startChange(lent));
    await signBoth(first);
    const second = await issueChange(lent, await startChange(lent, { title: 'Another window', days: 3 }));
    await signBoth(second);
    const read = made<Change>(await lent.ann.get(changeAt(lent, first.id)));
    expect(read.effect).toMatchObject({ before: { contractSumCents: 40_000_000 }, after: { contractSumCents: 40_095_137, completionDate: '2027-07-02' }, nextDraw: null });
    const [paper] = await house.sql<{ effect: string; hash: string }>(`select effect, effect_hash as hash from document where subject_id = $1 and kind = 'change'`, [first.id]);
    expect(paper?.hash).toBe(first.effectHash);
    await expect(house.sql(`insert into document select firm_id, job_id, $2, kind, subject_id, name, sha256, bytes, storage_key || 'x', created_at, effect || ' ', effect_hash from document where subject_id = $1 limit 1`, [first.id, v7()])).rejects.toMatchObject({ code: '23514' });
  });

  it('is asked for again when the loan changes who funds it', async () => {
    lent = await lentJob(house, url, { firm, loan: null });
    const seen = await issueChange(lent, await startChange(lent));
    expect(seen.effect?.funding).toBe('homeowner');
    made(await signChange(lent, lent.ann, seen));
    made(await lent.principal.post(`/jobs/${lent.job.id}/loan`, loanInput()));
    const anew = await withPaper(lent, seen.id);
    expect([anew.state, anew.effect?.funding, anew.signers.map(({ signedAt }) => signedAt)]).toEqual(['issued', 'homeowner_until_lender_agrees', [null, null]]);
    expect((await signChange(lent, lent.ben, seen, 'Ben Moss')).body).toMatchObject({ code: 'effect_changed' });
    expect((await signBoth(anew)).state).toBe('approved');
    // what nobody signs by is corrected without asking again
    const other = await issueChange(lent, await startChange(lent));
    made(await lent.principal.post(`/jobs/${lent.job.id}/loan`, loanInput({ lenderName: 'Fallbrook Savings' })));
    expect((await withPaper(lent, other.id)).document?.sha256).toBe(other.document?.sha256);
  });

  it('that moved under somebody is refused, with what they saw and what it is now', async () => {
    const first = await issueChange(lent, await startChange(lent));
    const other = await issueChange(lent, await startChange(lent, { title: 'Another window', lines: [costLine({ description: 'Window', quantity: '1', unitCost: '900' })], days: 0 }));
    await signBoth(first);
    await withPaper(lent, other.id);
    const refused = await lent.ann.post(changeAt(lent, other.id, 'sign'), signature(other, 'Ann Moss'));
    expect(refused.body).toMatchObject({
      code: 'effect_changed',
      detail:
        'What signing does has changed since you opened it. You were shown +$1,089.00 and 0 days, with a contract sum of $401,089.00 and completion by June 30, 2027. It is now +$1,089.00 and 0 days, with a contract sum of $402,040.37 and completion by July 2, 2027. Look at it again before you decide.',
    });
  });

  it('is explained with photos of the job, which are part of what is signed and stand in the paper', async () => {
    const photoId = await prove(lent, 'Foundation');
    await until(async () => made<Photo>(await lent.principal.get(`/jobs/${lent.job.id}/photos/${photoId}`)).state === 'ready', 'the photo');
    const plain = await issueChange(lent, await startChange(lent));
    const seen = await issueChange(lent, await startChange(lent, { photoIds: [photoId] }));
    expect(seen.photos).toMatchObject([{ id: photoId, width: 320, height: 240 }]);
    expect(JSON.parse((await house.sql<{ effect: string }>('select effect from document where id = $1', [seen.document?.id]))[0]?.effect ?? '{}')).toMatchObject({ change: { photos: [expect.stringMatching(/^[0-9a-f]{64}$/)] } });
    const pictures = async (id: string) => {
      const { body } = await request(url).get(`/api/jobs/${lent.job.id}/documents/${id}`).set('Cookie', lent.ann.cookie()).buffer(true).parse((res, done) => {
        const chunks: Buffer[] = [];
        res.on('data', (chunk: Buffer) => chunks.push(chunk)).on('end', () => done(null, Buffer.concat(chunks)));
      });
      const dir = mkdtempSync(path.join(tmpdir(), 'paper-'));
      writeFileSync(path.join(dir, 'paper.pdf'), body as Buffer);
      const listed = spawnSync('pdfimages', ['-list', path.join(dir, 'paper.pdf')], { encoding: 'utf8' }).stdout;
      rmSync(dir, { recursive: true });
      return listed.split('\n').filter((line) => /jpeg/.test(line)).length;
    };
    expect([await pictures(plain.document?.id ?? ''), await pictures(seen.document?.id ?? '')]).toEqual([0, 1]);

    const elsewhere = await lentJob(house, url);
    const foreign = await prove(elsewhere, 'Foundation');
    const refused = await lent.principal.post(`/jobs/${lent.job.id}/changes`, changeDraft(lent, { photoIds: [foreign] }));
    expect(refused.body).toMatchObject({ errors: [{ pointer: '/photoIds' }] });
  });
});
