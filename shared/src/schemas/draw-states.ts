export const drawStates = ['draft', 'submitted', 'returned', 'approved', 'part_paid', 'paid', 'void'] as const;
export type DrawState = (typeof drawStates)[number];

/** What can be done with a draw and from where; `to` is null where the state stays. */
export const drawTransitions = {
  adjust: { from: ['draft', 'returned'], to: null },
  submit: { from: ['draft', 'returned'], to: 'submitted' },
  object: { from: ['submitted'], to: null },
  return: { from: ['submitted'], to: 'returned' },
  approve: { from: ['submitted'], to: 'approved' },
  void: { from: ['draft', 'submitted', 'returned'], to: 'void' },
  pay: { from: ['approved', 'part_paid'], to: null },
  pay_part: { from: ['approved', 'part_paid', 'paid'], to: 'part_paid' },
  pay_rest: { from: ['approved', 'part_paid'], to: 'paid' },
  take_back: { from: ['part_paid', 'paid'], to: 'approved' },
} as const satisfies Record<string, { from: readonly DrawState[]; to: DrawState | null }>;
export type DrawAct = keyof typeof drawTransitions;

export const mayDraw = (state: DrawState, act: DrawAct): boolean => (drawTransitions[act].from as readonly DrawState[]).includes(state);

/** The state that money puts an approved draw into: what the builder has of what is due. */
export function drawStateByMoney(dueCents: number, keptCents: number): DrawState {
  if (keptCents >= dueCents) return 'paid';
  return keptCents > 0 ? 'part_paid' : 'approved';
}

export const reviewStates = ['not_needed', 'ordered', 'inspected', 'allowed', 'funded'] as const;
export type ReviewState = (typeof reviewStates)[number];

/** The lender's review runs beside the homeowners' approval; it never changes what is owed, only who pays it when. */
export const reviewTransitions = {
  order: { from: ['not_needed', 'ordered', 'inspected', 'allowed'], to: 'ordered' },
  inspect: { from: ['ordered', 'inspected'], to: 'inspected' },
  allow: { from: ['inspected', 'allowed'], to: 'allowed' },
  fund_part: { from: ['allowed'], to: 'allowed' },
  fund_rest: { from: ['allowed'], to: 'funded' },
} as const satisfies Record<string, { from: readonly ReviewState[]; to: ReviewState }>;
export type ReviewAct = keyof typeof reviewTransitions;

export const mayReview = (state: ReviewState, act: ReviewAct): boolean => (reviewTransitions[act].from as readonly ReviewState[]).includes(state);
