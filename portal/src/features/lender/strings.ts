import { formatMoney } from '@tallypole/shared/money';
import type { FundingBlocker, LendingRow } from '@tallypole/shared/schemas/lending';

/** Every word of this feature's pages, in one place. */
export const strings = {
  title: 'To fund',
  explain: 'Draws that ask for money from your loans: what can be sent today, and for the rest the one thing in its way.',
  today: 'Can be funded today',
  later: 'Not yet',
  none: 'No draw waits for you. When a builder sends one on a job that you lend for, it stands here with its proof.',
  noneToday: 'Nothing can be funded today.',
  inAll: 'in all',
  due: (on: string) => `due ${on}`,
  seen: 'Seen',
  billed: 'Billed',
  photos: (n: number) => (n === 1 ? '1 photo' : `${n} photos`),
  open: 'Look at the proof',
  fund: (sum: number) => `Fund ${formatMoney(sum)}`,
  blocker: (row: LendingRow): string => BLOCKERS[row.blocker ?? 'not_inspected'](row),
  loan: {
    title: 'Loan',
    explain: 'What the bank lends for this job, and how a draw is split between it and the homeowner.',
    none: 'No loan is entered: the homeowner pays the draws.',
    fields: {
      lenderName: 'Lender', amountCents: 'Loan', constructionCents: 'Of it for construction', equityFirstCents: 'The homeowner’s money first', holdbackRate: 'Held back by the lender', consentLimitCents: 'Changes need the lender’s consent above',
      shortfall: 'What the loan does not pay in a draw', route: 'The lender’s money goes to',
    },
    hints: { constructionCents: 'Without interest reserve, land and fees.', equityFirstCents: 'Used up before the loan is drawn on.', holdbackRate: 'A share of each line; 0 if none.' },
    shortfall: { homeowner: 'The homeowner pays it now', carried: 'It waits for the lender' },
    route: { builder: 'the builder', borrower: 'the borrower', joint_check: 'both, by a joint check', title_company: 'a title company' },
    save: 'Save the terms',
    saved: 'The terms are saved.',
    disbursed: 'Sent so far',
  },
} as const;

const BLOCKERS: Readonly<Record<FundingBlocker, (row: LendingRow) => string>> = {
  returned: () => 'It went back to the builder for correction.',
  unproven: ({ billedCents, provenCents }) => `${formatMoney(billedCents)} is billed, but only ${formatMoney(provenCents)} of it was seen in place.`,
  not_inspected: () => 'Your inspection is not recorded yet.',
  not_allowed: () => 'You have not said yet how far you take the lines to be.',
  conditions: ({ conditions }) => `Your condition is open: ${conditions}`,
  not_approved: ({ approvals }) => `The homeowners have not approved it yet (${approvals.given} of ${approvals.needed}).`,
};
