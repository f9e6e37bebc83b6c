import { changeEffect, type ChangeEffect, type ChangeSnapshot, type ScopeLine } from '@tallypole/shared/changes';
import type { ChangeState } from '@tallypole/shared/schemas/change-states';
import type { Change, CostLine, PricingTermsInput } from '@tallypole/shared/schemas/changes';
import type { DayKind } from '@tallypole/shared/due';
import type { OwnersLine } from '@tallypole/shared/pricing';
import { canonicalText } from '@tallypole/shared/record';
import { createHash } from 'node:crypto';
import type { Json } from '../common/canonical.ts';
import { nextDraws, type NextDrawFacts } from '../draws/next-draw.ts';

export interface SignerFact {
  personId: string;
  name: string;
  email: string;
  signedAt: string | null;
  typedName: string | null;
  effectHash: string | null;
  documentSha256: string | null;
  consentVersion: string | null;
  fromAddress: string | null;
}

interface PaperFact {
  id: string;
  sha256: string;
  storageKey: string;
  /** What it says is agreed, as the exact text that its hash was taken of. */
  effect: string | null;
}

/** All that one change's page, acts and papers need; read in one statement. */
export interface ChangeFacts {
  job: {
    id: string;
    firmId: string;
    firmName: string;
    /** Whether the firm lets its site people see prices. */
    siteSeesPrices: boolean;
    name: string;
    place: string;
    timeZone: string;
    contractSumCents: number;
    changesApprovedCents: number;
    completeBy: string;
    dayKind: DayKind;
    daysApproved: number;
    homeownersSign: 'one' | 'all';
    earnedToDateCents: number;
    /** Work billed, retainage included. */
    billedToDateCents: number;
    hasLoan: boolean;
    consentLimitCents: number | null;
  };
  change: {
    id: string;
    number: number;
    revision: string;
    state: ChangeState;
    title: string;
    reason: string;
    origin: Change['origin'];
    structural: boolean;
    presentation: Change['presentation'];
    noCharge: boolean;
    chargedCents: number;
    days: number;
    milestoneId: string | null;
    milestoneName: string | null;
    goodUntil: string;
    effectHash: string | null;
    closedReason: string | null;
    createdBy: string;
    version: number;
  };
  lines: OwnersLine[];
  scope: ScopeLine[];
  photos: { id: string; note: string; sha256: string; width: number; height: number; storageKey: string }[];
  reviews: Change['reviews'];
  signers: SignerFact[];
  /** Who priced it, and to whom answers go; null where the reader doesn't know them. */
  author: { name: string; email: string } | null;
  document: PaperFact | null;
  signedDocument: PaperFact | null;
  supersededBy: { id: string; revision: string; chargedCents: number } | null;
  /** What the job's next draw follows from. */
  next: NextDrawFacts;
  /** Null for whoever may not see it: the database keeps it from them. */
  cost: { lines: CostLine[]; terms: PricingTermsInput; ownTerms: boolean; termsReason: string } | null;
}

/** The snapshot that the effect follows from. */
export function snapshotOf({ job, change, lines, scope, photos, reviews }: ChangeFacts): ChangeSnapshot {
  const { number, revision, title, reason, chargedCents, days, goodUntil, structural, milestoneName } = change;
  return {
    job: {
      contractSumAsSignedCents: job.contractSumCents,
      changesApprovedCents: job.changesApprovedCents,
      completeBy: job.completeBy,
      dayKind: job.dayKind,
      daysApproved: job.daysApproved,
      earnedToDateCents: job.earnedToDateCents,
      hasLoan: job.hasLoan,
      consentLimitCents: job.consentLimitCents,
    },
    change: {
      number, revision, title, reason, chargedCents, days, goodUntil, structural, milestoneName, lines, scope,
      photos: photos.map(({ sha256 }) => sha256),
      reviews: reviews.filter(({ current }) => current).map(({ kind, reviewerName, license, reviewedOn, fileName, fileSha256 }) => ({ kind, reviewerName, license, reviewedOn, fileName, fileSha256 })),
    },
  };
}

/** The effect and its hash: what is shown is what is signed. What is earned meanwhile doesn't change what is agreed, so it stays outside the hash. */
export function effectOf(facts: ChangeFacts): { effect: ChangeEffect; text: string; hash: string } {
  const effect = changeEffect(snapshotOf(facts));
  const { leftToBillCents: _before, ...before } = effect.before;
  const { leftToBillCents: _after, ...after } = effect.after;
  const text = canonicalText({ ...effect, before, after } as unknown as Json);
  return { effect, text, hash: createHash('sha256').update(text).digest('hex') };
}

/** What a paper said is agreed: the effect as it was hashed. */
export type AgreedEffect = Omit<ChangeEffect, 'before' | 'after'> & Record<'before' | 'after', Omit<ChangeEffect['before'], 'leftToBillCents'>>;
export const agreedIn = (paper: { effect: string | null } | null): AgreedEffect | null => (paper?.effect ? (JSON.parse(paper.effect) as AgreedEffect) : null);

/** The first draw in which the change is asked for, without and with it, as things stand today; null before there is a schedule. */
export const nextDrawOf = ({ next, change, lines }: ChangeFacts, today: string) => nextDraws(next, { milestoneId: change.milestoneId, lines: lines.filter(({ cents }) => cents !== 0) }, today);

/** "Change 7", "Change 7A". */
export const changeName = ({ number, revision }: { number: number; revision: string }): string => `Change ${number}${revision}`;
