import { changeSteps } from '@tallypole/shared/changes';
import { formatChange, formatMoney } from '@tallypole/shared/money';
import type { Column, Content } from 'pdfmake/interfaces.js';
import { writtenBusinessDate, writtenDate } from '../common/written-date.ts';
import { printedArithmetic } from '../documents/arithmetic.ts';
import { beforeAfter, ruledTable } from '../documents/tables.ts';
import type { Paper } from '../documents/pdf.ts';
import { changeName, effectOf, nextDrawOf, snapshotOf, type ChangeFacts, type SignerFact } from './change-facts.ts';
import { nextDrawName, paperFundingWords, reviewWords, structuralCaution } from './words.ts';

const days = (count: number) => (count === 1 ? '1 day' : `${count} days`);

/** What the homeowners sign: the reason, what differs, the whole effect, the reviews. */
export function changePaper(facts: ChangeFacts, today: string, pictures: readonly Buffer[]): Paper {
  const { job, change, lines, scope, reviews } = facts;
  const { effect, hash } = effectOf(facts);
  const { before, after } = effect;
  const next = nextDrawOf(facts, today);
  const { contractSum, completionDate } = changeSteps(snapshotOf(facts));
  const effects = [
    { name: 'Contract sum', before: formatMoney(before.contractSumCents), after: formatMoney(after.contractSumCents) },
    { name: 'Finished by', before: writtenBusinessDate(before.completionDate), after: writtenBusinessDate(after.completionDate) },
    ...(next ? [{ name: nextDrawName(change), before: formatMoney(next.before.dueNowCents), after: formatMoney(next.after.dueNowCents) }] : []),
  ];
  const content: Content[] = [
    { text: `${changeName(change)}: ${change.title}`, style: 'title' },
    { text: `${formatChange(change.chargedCents)} · ${days(change.days)} · the price holds until ${writtenBusinessDate(change.goodUntil, true)}`, style: 'quiet' },
    { text: 'Why', style: 'heading' },
    { text: change.reason },
    ...(pictures.length > 0 ? [pictureRows(facts, pictures)] : []),
    { text: 'What differs', style: 'heading' },
    // however the price is shown, what is built is said
    ...(change.presentation !== 'itemized' && scope.length > 0 ? [scopeTable(scope)] : []),
    lines.length > 0
      ? ruledTable(['', ''], [...lines.map((line) => [line.description, formatChange(line.cents)]), ['Price of the change', formatChange(change.chargedCents)]], ['*', 'auto'])
      : { text: `No price; time alone: ${days(change.days)}.` },
    { unbreakable: true, stack: [{ text: 'What it does', style: 'heading' }, beforeAfter(effects)] },
    ...(next ? [{ text: `The draw is worked out from what is proven and owed on ${writtenBusinessDate(today)}; it is no part of what is agreed.`, style: 'small', margin: [0, 4, 0, 0] } satisfies Content] : []),
    { text: `Who pays it: ${paperFundingWords[effect.funding]}.${effect.needsLendersWord ? ' The sum is above what may be agreed without the lender.' : ''}`, margin: [0, 8, 0, 0] },
    ...(change.milestoneName ? [{ text: `It lands on the milestone "${change.milestoneName}".` }] : []),
    { text: 'How the figures are worked out', style: 'heading' },
    printedArithmetic([contractSum, completionDate]),
    ...(change.structural ? structural(reviews.filter(({ current }) => current)) : []),
    { text: 'By signing, the homeowners agree to the change above, its price and its days, as an addition to the contract. Everything else in the contract stays as it is.', margin: [0, 18, 0, 0] },
    { text: `Effect ${hash}`, style: 'small', margin: [0, 10, 0, 0] },
  ];
  return { title: `${changeName(change)}, ${job.name}`, head: `${job.firmName} · ${job.name}, ${job.place}`, foot: `${changeName(change)}`, content };
}

/** Two pictures beside each other, each with its note. */
function pictureRows({ photos }: ChangeFacts, pictures: readonly Buffer[]): Content {
  const cells = pictures.map((picture, i): Column => ({ stack: [{ image: `data:image/jpeg;base64,${picture.toString('base64')}`, fit: [232, 174] }, { text: photos[i]?.note ?? '', style: 'small', margin: [0, 3, 0, 0] }], width: 232 }));
  const pairs = cells.filter((_, i) => i % 2 === 0).map((_, i) => cells.slice(i * 2, i * 2 + 2));
  return { stack: pairs.map((columns): Content => ({ columns, columnGap: 20, margin: [0, 8, 0, 0], unbreakable: true })) };
}

const scopeTable = (scope: ChangeFacts['scope']): Content => ({
  margin: [0, 0, 0, 10],
  stack: [ruledTable(['', 'quantity'], scope.map(({ description, effect, quantity, unit }) => [`${effect === 'deduct' ? 'Taken out: ' : ''}${description}`, `${quantity} ${unit}`]), ['*', 'auto'])],
});

function structural(reviews: ChangeFacts['reviews']): Content[] {
  const rows = reviews.map((review) => [
    `${reviewWords[review.kind]}, ${review.reviewerName}${review.license ? ` (${review.license})` : ''}\n${review.fileName}\nSHA-256 ${review.fileSha256}`,
    writtenBusinessDate(review.reviewedOn),
  ]);
  // heading, caution and reviews stay together on a page, as long as they fit on one
  return [{ unbreakable: rows.length <= 6, stack: [{ text: 'Structure', style: 'heading' }, { text: structuralCaution, margin: [0, 0, 0, 6] }, ruledTable(['Reviewed by', 'on'], rows, ['*', 'auto'])] }];
}

export interface Anchor {
  seq: number;
  hash: string;
}

/** The page that is joined to it: who signed, when, from where, and what exactly. */
export function signaturePaper(facts: ChangeFacts, original: { sha256: string }, anchor: Anchor): Paper {
  const { job, change, signers } = facts;
  const signed = signers.filter((signer): signer is SignerFact & { signedAt: string } => signer.signedAt !== null);
  const content: Content[] = [
    { text: 'Signatures', style: 'title' },
    { text: `to ${changeName(change)}, ${change.title}, on the pages before.`, style: 'quiet' },
    ...signed.map((signer): Content => ({
      margin: [0, 18, 0, 0],
      stack: [
        { text: signer.typedName ?? signer.name, font: 'Lora', italics: true, fontSize: 19 },
        { canvas: [{ type: 'line', x1: 0, y1: 2, x2: 300, y2: 2, lineWidth: 0.8, lineColor: '#25282c' }] },
        { text: `${signer.name}, homeowner, signed in as ${signer.email}`, margin: [0, 4, 0, 0] },
        { text: `on ${signedAt(signer.signedAt, job.timeZone)}, from ${signer.fromAddress ?? 'an unknown address'}` },
        { text: `agreed to sign electronically (wording of ${signer.consentVersion ?? ''}) and confirmed by a code mailed to that address`, style: 'small' },
        { text: `effect ${signer.effectHash ?? ''}`, style: 'small' },
      ],
    })),
    { text: 'What was signed', style: 'heading' },
    { text: `The pages before this one, as a file of its own with the SHA-256\n${original.sha256}` },
    { text: `The job's record stood at entry ${anchor.seq} with the hash\n${anchor.hash}`, margin: [0, 8, 0, 0] },
    { text: 'Electronic signatures rest on consent and on the record of who signed what and when. State law and counsel decide where paper is needed.', style: 'small', margin: [0, 16, 0, 0] },
  ];
  return { title: `${changeName(change)}, signatures`, head: `${job.firmName} · ${job.name}, ${job.place}`, foot: `${changeName(change)}, signatures`, content };
}

const signedAt = (instant: string, timeZone: string): string =>
  `${writtenDate(new Date(instant), timeZone)} at ${new Intl.DateTimeFormat('en-US', { timeZone, hour: 'numeric', minute: '2-digit', timeZoneName: 'short' }).format(new Date(instant))}`;
