/** The states of a change, in the order of its life. */
export const changeStates = ['draft', 'in_review', 'issued', 'partly_signed', 'approved', 'declined', 'lapsed', 'withdrawn', 'superseded'] as const;
export type ChangeState = (typeof changeStates)[number];

/** Every act that moves a change: from which states, to which. Undoing an approved one is another change. */
export const changeTransitions = {
  edit: { from: ['draft', 'in_review'], to: 'draft' },
  ask_review: { from: ['draft'], to: 'in_review' },
  review: { from: ['draft', 'in_review'], to: 'in_review' },
  issue: { from: ['draft', 'in_review'], to: 'issued' },
  sign_part: { from: ['issued', 'partly_signed'], to: 'partly_signed' },
  sign_last: { from: ['issued', 'partly_signed'], to: 'approved' },
  ask_again: { from: ['issued', 'partly_signed'], to: 'issued' },
  decline: { from: ['issued', 'partly_signed'], to: 'declined' },
  lapse: { from: ['issued', 'partly_signed'], to: 'lapsed' },
  withdraw: { from: ['issued', 'partly_signed'], to: 'withdrawn' },
  supersede: { from: ['issued', 'partly_signed', 'declined', 'lapsed', 'withdrawn'], to: 'superseded' },
} as const satisfies Record<string, { from: readonly ChangeState[]; to: ChangeState }>;
export type ChangeAct = keyof typeof changeTransitions;

export const mayChange = (state: ChangeState, act: ChangeAct): boolean => (changeTransitions[act].from as readonly ChangeState[]).includes(state);
