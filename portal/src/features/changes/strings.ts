import type { Change } from '@tallypole/shared/schemas/changes';
import type { ChangeState } from '@tallypole/shared/schemas/change-states';
import type { Meaning } from '../../ui/state-tag.tsx';

export const states: Readonly<Record<ChangeState, { words: string; meaning: Meaning }>> = {
  draft: { words: 'Draft', meaning: 'neutral' },
  in_review: { words: 'In review', meaning: 'neutral' },
  issued: { words: 'Waits for a decision', meaning: 'waits' },
  partly_signed: { words: 'Waits for another signature', meaning: 'waits' },
  approved: { words: 'Signed', meaning: 'settled' },
  declined: { words: 'Declined', meaning: 'refused' },
  lapsed: { words: 'Lapsed', meaning: 'refused' },
  withdrawn: { words: 'Withdrawn', meaning: 'neutral' },
  superseded: { words: 'Replaced by a revision', meaning: 'neutral' },
};

/** What a change means for whoever builds. */
export function forSite(state: ChangeState): { words: string; meaning: Meaning } {
  switch (state) {
    case 'approved':
      return { words: 'Build this', meaning: 'settled' };
    case 'draft':
    case 'in_review':
    case 'issued':
    case 'partly_signed':
      return { words: 'Not yet', meaning: 'waits' };
    case 'superseded':
      return { words: 'Replaced by a revision', meaning: 'neutral' };
    case 'declined':
    case 'lapsed':
    case 'withdrawn':
      return { words: 'Refused: build as drawn', meaning: 'refused' };
  }
}

export const origins = [
  { value: 'homeowner_wish', label: "The homeowner's wish" },
  { value: 'field_condition', label: 'Something found on site' },
  { value: 'design_correction', label: 'A correction of the design' },
  { value: 'allowance', label: 'An allowance to settle' },
  { value: 'substitution', label: "A supplier's substitution" },
  { value: 'weather', label: 'Weather: time alone' },
] as const;

export const presentations = [
  { value: 'itemized', label: 'Line by line, mark-up spread over the lines' },
  { value: 'grouped', label: 'By kind: labor, materials, …' },
  { value: 'one_sum', label: 'As one sum' },
] as const;

export const reviewKinds = [
  { value: 'engineered_sheet', label: "The supplier's engineered sheet" },
  { value: 'designer_review', label: "The designer's review" },
  { value: 'official_approval', label: "The building official's approval" },
] as const;

/** Who pays it, said to one of those who would, or to somebody else. */
export function funding(by: NonNullable<Change['effect']>['funding'], mine: boolean): { before: string; after: string } {
  const cash = mine ? 'you, in cash' : 'the homeowner';
  switch (by) {
    case 'nothing_to_pay':
      return { before: 'nothing is to be paid', after: 'nobody' };
    case 'homeowner':
      return { before: 'there is no loan', after: cash };
    case 'homeowner_until_lender_agrees':
      return { before: 'the bank has not agreed', after: cash };
    case 'less_to_pay':
      return { before: 'less is to be paid', after: 'nobody' };
  }
}

export const strings = {
  title: 'Changes',
  hint: 'What was changed since the contract was signed, and what waits for a decision.',
  empty: 'Here will be every change to the contract: what it is for, what it costs, and who signed it.',
  caution: 'This touches the structure of the house. The plans, the designer of record and the local code decide what may be built; the figures here are for the price.',
  consent: 'I agree to sign this change electronically. I can ask for it on paper instead.',
  changed: 'What signing does has changed since you opened it. These are the figures now; look at them before you decide.',
  refuse: 'If you do nothing, the price lapses after that day and the change is not made. Nothing is agreed by silence.',
} as const;

export const changeName = ({ number, revision }: { number: number; revision: string }): string => `Change ${number}${revision}`;
export const dayCount = (days: number): string => (days === 0 ? 'no more days' : days === 1 ? 'one more day' : `${days} more days`);
