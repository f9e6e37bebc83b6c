import { changeSteps } from '@tallypole/shared/changes';
import type { Change } from '@tallypole/shared/schemas/changes';
import type { ChangeState } from '@tallypole/shared/schemas/change-states';
import { changeStates } from '@tallypole/shared/schemas/change-states';
import { may } from '@tallypole/shared/schemas/permissions';
import { firmRoles, type Role } from '@tallypole/shared/schemas/roles';
import { agreedIn, effectOf, nextDrawOf, snapshotOf, type ChangeFacts } from './change-facts.ts';
import { costOf } from './pricing-draft.ts';

const inFirm = (roles: readonly Role[]): boolean => roles.some((role) => (firmRoles as readonly Role[]).includes(role));
const seesCost = (roles: readonly Role[]): boolean => inFirm(roles) && may(roles, 'money.read');

/** Who sees what a change costs the homeowners: whoever sees the job's money, and the site where the firm has said so. */
export const seesPrices = (roles: readonly Role[], siteSeesPrices: boolean): boolean => may(roles, 'money.read') || (siteSeesPrices && roles.includes('site'));

/** Which states somebody may see: outside the firm a change exists from the day it is sent out; the designer sees it in review. */
export function visibleStates(roles: readonly Role[]): ChangeState[] {
  if (inFirm(roles)) return [...changeStates];
  return changeStates.filter((state) => state !== 'draft' && (state !== 'in_review' || roles.includes('designer')));
}

/** A change as somebody may see it: prices, cost and addresses only where their role includes them. */
export function changeView(facts: ChangeFacts, roles: readonly Role[], { personId, today }: { personId: string; today: string }): Change {
  const { change, job } = facts;
  const { effectHash, closedReason, createdBy: _createdBy, chargedCents, ...row } = change;
  const money = may(roles, 'money.read');
  const prices = seesPrices(roles, job.siteSeesPrices);
  // once signed, what was agreed is read from the paper; before, it follows from the job as it is
  const open = change.state !== 'approved';
  return {
    ...row,
    chargedCents: prices ? chargedCents : null,
    lines: prices ? facts.lines : [],
    scope: facts.scope,
    photos: facts.photos.map(({ id, note, width, height }) => ({ id, note, width, height })),
    reviews: facts.reviews,
    ...(money && open ? openEffect(facts, today) : { effect: money ? agreedEffect(facts) : null, steps: null }),
    effectHash: money ? effectHash : null,
    document: paper(money, facts.document),
    signedDocument: paper(money, facts.signedDocument),
    signers: facts.signers.map(({ personId: id, name, signedAt }) => ({ personId: id, name, signedAt, me: id === personId })),
    signersNeeded: job.homeownersSign,
    closedReason,
    supersededBy: facts.supersededBy ? { id: facts.supersededBy.id, revision: facts.supersededBy.revision } : null,
    cost: facts.cost && seesCost(roles) ? costOf(facts.cost, change.noCharge) : null,
  };
}

function openEffect(facts: ChangeFacts, today: string): Pick<Change, 'effect' | 'steps'> {
  const { before, after, funding, needsLendersWord } = effectOf(facts).effect;
  const next = nextDrawOf(facts, today);
  const sums = next && { before: figuresOf(next.before), after: figuresOf(next.after) };
  return {
    effect: { before, after, funding, needsLendersWord, nextDraw: sums },
    steps: { ...changeSteps(snapshotOf(facts)), nextDraw: next?.after.steps.dueNow ?? null, homeowner: next?.after.steps.homeowner ?? null },
  };
}

function agreedEffect(facts: ChangeFacts): Change['effect'] {
  const agreed = agreedIn(facts.document);
  if (!agreed) return null;
  const { before, after, funding, needsLendersWord } = agreed;
  return { before: { ...before, leftToBillCents: null }, after: { ...after, leftToBillCents: null }, funding, needsLendersWord, nextDraw: null };
}

const figuresOf = ({ dueNowCents, homeownerCents, loanCents }: { dueNowCents: number; homeownerCents: number; loanCents: number }) => ({ dueNowCents, homeownerCents, loanCents });
const paper = (shown: boolean, document: ChangeFacts['document']) => (shown && document ? { id: document.id, sha256: document.sha256 } : null);
