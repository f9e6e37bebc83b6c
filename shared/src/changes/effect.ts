import { date, given, money, quantity, step, type Step } from '../arithmetic/index.ts';
import { addDays, type DayKind } from '../due/index.ts';
import { minus, sum, type Cents } from '../money/index.ts';
import type { OwnersLine } from '../pricing/index.ts';

/** What stands in a review of a structural change. */
export interface ReviewFact {
  kind: 'designer_review' | 'engineered_sheet' | 'official_approval';
  reviewerName: string;
  license: string;
  reviewedOn: string;
  fileName: string;
  fileSha256: string;
}

/** What is built or taken out, without a price. */
export interface ScopeLine {
  description: string;
  effect: 'add' | 'deduct';
  /** A decimal with up to 4 places. */
  quantity: string;
  unit: string;
}

/** One snapshot of everything that a change's effect follows from; amounts in cents. */
export interface ChangeSnapshot {
  job: {
    contractSumAsSignedCents: Cents;
    changesApprovedCents: Cents;
    completeBy: string;
    dayKind: DayKind;
    daysApproved: number;
    earnedToDateCents: Cents;
    hasLoan: boolean;
    consentLimitCents: Cents | null;
  };
  change: {
    number: number;
    revision: string;
    title: string;
    reason: string;
    chargedCents: Cents;
    days: number;
    goodUntil: string;
    structural: boolean;
    milestoneName: string | null;
    lines: readonly OwnersLine[];
    scope: readonly ScopeLine[];
    /** SHA-256 of each picture it is explained with. */
    photos: readonly string[];
    reviews: readonly ReviewFact[];
  };
}

/** Who funds it, as far as can be said before the lender has spoken: until it agrees, it is the homeowner's. */
export type Funding = 'nothing_to_pay' | 'homeowner' | 'homeowner_until_lender_agrees' | 'less_to_pay';

interface Figures {
  contractSumCents: Cents;
  completionDate: string;
  leftToBillCents: Cents;
}

/** The whole effect of signing: what the page shows, what is signed by its hash, and what the act does. */
export interface ChangeEffect {
  change: ChangeSnapshot['change'];
  before: Figures;
  after: Figures;
  funding: Funding;
  needsLendersWord: boolean;
}

/** The effect of a change on contract sum, completion date and what is left to pay. Pure: the same snapshot gives the same effect. Throws InvalidInput. */
export function changeEffect({ job, change }: ChangeSnapshot): ChangeEffect {
  const before = figures(job, job.changesApprovedCents, job.daysApproved);
  const after = figures(job, sum([job.changesApprovedCents, change.chargedCents]), job.daysApproved + change.days);
  return { change, before, after, funding: fundingOf(job.hasLoan, change.chargedCents), needsLendersWord: job.hasLoan && change.chargedCents > (job.consentLimitCents ?? 0) };
}

function figures(job: ChangeSnapshot['job'], changesApproved: Cents, days: number): Figures {
  const contractSumCents = sum([job.contractSumAsSignedCents, changesApproved], 'contractSum');
  return { contractSumCents, completionDate: addDays(job.dayKind, job.completeBy, days), leftToBillCents: minus(contractSumCents, job.earnedToDateCents) };
}

function fundingOf(hasLoan: boolean, charged: Cents): Funding {
  if (charged === 0) return 'nothing_to_pay';
  if (charged < 0) return 'less_to_pay';
  return hasLoan ? 'homeowner_until_lender_agrees' : 'homeowner';
}

/** The price of a change as its lines show it to whoever signs; how cost became price is the firm's. Throws InvalidInput. */
export const priceSteps = ({ chargedCents, lines }: { chargedCents: Cents; lines: readonly Pick<OwnersLine, 'description' | 'cents'>[] }): Step =>
  step('This change', 'sum of its lines', money(chargedCents), lines.map((line) => given(line.description, money(line.cents))));

/** The arithmetic behind the three figures after signing. */
export function changeSteps({ job, change }: ChangeSnapshot): Record<'contractSum' | 'completionDate' | 'leftToBill', Step> {
  const { after } = changeEffect({ job, change });
  const contractSum = step('Contract sum after signing', 'as signed + changes approved + this change', money(after.contractSumCents), [
    given('As signed', money(job.contractSumAsSignedCents)),
    given('Changes approved', money(job.changesApprovedCents)),
    priceSteps(change),
  ]);
  const completionDate = step('Finished by', `completion date of the contract + approved days + the days of this change, in ${job.dayKind} days`, date(after.completionDate), [
    given('Completion date of the contract', date(job.completeBy)),
    given('Approved before', quantity(job.daysApproved, 'days')),
    given('This change', quantity(change.days, 'days')),
  ]);
  const leftToBill = step('Left to bill', 'contract sum after signing − earned to date', money(after.leftToBillCents), [contractSum, given('Earned to date', money(job.earnedToDateCents))]);
  return { contractSum, completionDate, leftToBill };
}
