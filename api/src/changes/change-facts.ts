import { changeEffect, type ChangeEffect, type ChangeSnapshot } from '@tallypole/shared/changes';
import type { ChangeState } from '@tallypole/shared/schemas/change-states';
import type { Change, CostLine, PricingTermsInput } from '@tallypole/shared/schemas/changes';
import type { DayKind } from '@tallypole/shared/due';
import type { OwnersLine } from '@tallypole/shared/pricing';
import { canonicalHash, type Json } from '../common/canonical.ts';

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

export interface PaperFact {
  id: string;
  sha256: string;
  storageKey: string;
}

/** All that one change's page, acts and papers need; read in one statement. */
export interface ChangeFacts {
  job: {
    id: string;
    firmId: string;
    firmName: string;
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
  reviews: Change['reviews'];
  signers: SignerFact[];
  document: PaperFact | null;
  signedDocument: PaperFact | null;
  supersededBy: { id: string; revision: string; chargedCents: number } | null;
  /** Null for whoever may not see it: the database keeps it from them. */
  cost: { lines: CostLine[]; terms: PricingTermsInput; ownTerms: boolean; termsReason: string } | null;
}

/** The snapshot that the effect follows from. */
export function snapshotOf({ job, change, lines, reviews }: ChangeFacts): ChangeSnapshot {
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
      number, revision, title, reason, chargedCents, days, goodUntil, structural, milestoneName, lines,
      reviews: reviews.map(({ kind, reviewerName, license, reviewedOn, fileName, fileSha256 }) => ({ kind, reviewerName, license, reviewedOn, fileName, fileSha256 })),
    },
  };
}

/** The effect and its hash: what is shown is what is signed. What is earned meanwhile doesn't change what is agreed, so it stays outside the hash. */
export function effectOf(facts: ChangeFacts): { effect: ChangeEffect; hash: string } {
  const effect = changeEffect(snapshotOf(facts));
  const { leftToBillCents: _before, ...before } = effect.before;
  const { leftToBillCents: _after, ...after } = effect.after;
  return { effect, hash: canonicalHash({ ...effect, before, after } as unknown as Json) };
}

/** "Change 7", "Change 7A". */
export const changeName = ({ number, revision }: { number: number; revision: string }): string => `Change ${number}${revision}`;
