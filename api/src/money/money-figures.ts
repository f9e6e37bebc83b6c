import { given, money, step, type Step } from '@tallypole/shared/arithmetic';
import { minus, sum } from '@tallypole/shared/money';
import type { JobMoney } from '@tallypole/shared/schemas/money';
import { writtenBusinessDate } from '../common/written-date.ts';
import type { Account, Source } from '../ledger/entry.ts';
import type { MoneyFacts, Posting } from './money.repository.ts';

type Figure = { cents: number; step: Step };
type Figures = Omit<JobMoney, 'asOf' | 'draws' | 'payments' | 'depositDueCents'>;

const figure = (label: string, rule: string, cents: number, inputs: Step[]): Figure => ({ cents, step: step(label, rule, money(cents), inputs) });

/** What the ledger says of a job's money. Each figure is the sum of postings that can be opened; debit and credit are turned the right way round. */
export function moneyFigures(facts: MoneyFacts, forFirm: boolean): Figures {
  const { postings } = facts;
  const of = (account: Account, wanted: (posting: Posting) => boolean = () => true) => postings.filter((posting) => posting.account === account && wanted(posting));
  const from = (source: Source) => of('homeowner_receivable', (posting) => posting.source === source);
  const due = (posting: Posting) => posting.cause === 'draw' || posting.cause === 'adjustment';
  const receivable = of('homeowner_receivable');

  const contractSumToday = figure('Contract sum today', 'as signed + changes approved', sum([facts.contractSumCents, facts.changesApprovedCents]), [
    given('As signed', money(facts.contractSumCents)),
    given('Changes approved', money(facts.changesApprovedCents)),
  ]);
  const billed = total('Billed to date', 'sum of the approved draws, before retainage', of('billed_work'), -1);
  const approved = total('Due from approved draws', 'sum of what was due', receivable.filter(due), 1);
  const paid = total('Paid to date', 'sum of payments, less what went back', receivable.filter((posting) => !due(posting)), -1);
  const retainageHeld = total('Retainage held', 'sum of what each draw held back', of('retainage_receivable'), 1);
  const open = figure('Open', 'due − paid', minus(approved.cents, paid.cents), [approved.step, paid.step]);
  const earned = minus(billed.cents, retainageHeld.cents);
  const leftToBill = figure('Left to bill', 'contract sum today − (billed − retainage held)', minus(contractSumToday.cents, earned), [contractSumToday.step, billed.step, retainageHeld.step]);
  return {
    contractSumToday,
    billed,
    approved,
    paid,
    open,
    openHomeowner: total('Open from the homeowner', 'what was due from them − what they paid', from('homeowner'), 1),
    openLoan: total('Open from the loan', 'what was due from it − what it paid', from('loan'), 1),
    retainageHeld,
    leftToBill,
    depositLeft: total('Deposit left', 'received − used in draws', of('deposit_held'), -1),
    fees: forFirm ? total('Processing fees', 'sum of the fees', of('processing_fees'), 1) : null,
  };
}

function total(label: string, rule: string, postings: readonly Posting[], sign: 1 | -1): Figure {
  const turned = (cents: number) => (sign === 1 ? cents : minus(0, cents));
  const inputs = postings.map((posting) => given(`${posting.memo}, ${writtenBusinessDate(posting.onDate)}`, money(turned(posting.cents)), originOf(posting)));
  return figure(label, rule, turned(sum(postings.map(({ cents }) => cents))), inputs);
}

function originOf({ cause, causeId, memo }: Posting) {
  if (cause === 'draw') return { record: 'draw', id: causeId, label: memo } as const;
  if (cause === 'payment' || cause === 'deposit' || cause === 'fee') return { record: 'payment', id: causeId, label: memo } as const;
  return undefined;
}
