import { changeSteps } from '@tallypole/shared/changes';
import type { Change } from '@tallypole/shared/schemas/changes';
import type { ChangeState } from '@tallypole/shared/schemas/change-states';
import { changeStates } from '@tallypole/shared/schemas/change-states';
import { may } from '@tallypole/shared/schemas/permissions';
import { firmRoles, type Role } from '@tallypole/shared/schemas/roles';
import { effectOf, snapshotOf, type ChangeFacts } from './change-facts.ts';
import { costOf } from './pricing-draft.ts';

const inFirm = (roles: readonly Role[]): boolean => roles.some((role) => (firmRoles as readonly Role[]).includes(role));
const seesCost = (roles: readonly Role[]): boolean => inFirm(roles) && may(roles, 'money.read');

/** Which states somebody may see: outside the firm a change exists from the day it is sent out; the designer sees it in review. */
export function visibleStates(roles: readonly Role[]): ChangeState[] {
  if (inFirm(roles)) return [...changeStates];
  return changeStates.filter((state) => state !== 'draft' && (state !== 'in_review' || roles.includes('designer')));
}

/** A change as somebody may see it: prices, cost and addresses only where their role includes them. */
export function changeView(facts: ChangeFacts, roles: readonly Role[], personId: string): Change {
  const { change, job } = facts;
  const { effectHash, closedReason, createdBy: _createdBy, chargedCents, ...row } = change;
  const prices = may(roles, 'money.read');
  const { effect } = effectOf(facts);
  const open = change.state !== 'approved';
  return {
    ...row,
    chargedCents: prices ? chargedCents : null,
    lines: prices ? facts.lines : [],
    reviews: facts.reviews,
    effect: prices && open ? { before: effect.before, after: effect.after, funding: effect.funding, needsLendersWord: effect.needsLendersWord } : null,
    steps: prices && open ? changeSteps(snapshotOf(facts)) : null,
    effectHash: prices ? effectHash : null,
    document: paper(prices, facts.document),
    signedDocument: paper(prices, facts.signedDocument),
    signers: facts.signers.map(({ personId: id, name, signedAt }) => ({ personId: id, name, signedAt, me: id === personId })),
    signersNeeded: job.homeownersSign,
    closedReason,
    supersededBy: facts.supersededBy ? { id: facts.supersededBy.id, revision: facts.supersededBy.revision } : null,
    cost: facts.cost && seesCost(roles) ? costOf(facts.cost, change.noCharge) : null,
  };
}

const paper = (shown: boolean, document: ChangeFacts['document']) => (shown && document ? { id: document.id, sha256: document.sha256 } : null);
