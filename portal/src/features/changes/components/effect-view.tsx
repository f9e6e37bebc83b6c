import type { Change } from '@tallypole/shared/schemas/changes';
import type { ReactNode } from 'react';
import { writtenDate } from '../../../lib/dates.ts';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { Effects, Section } from '../../../ui/page.tsx';
import { funding } from '../strings.ts';

export interface EffectViewProps {
  change: Change;
  effect: NonNullable<Change['effect']>;
  /** Whether the reader is one of those who would pay. */
  mine: boolean;
}

/** The whole effect of signing, before → after; each figure opens its arithmetic. Once signed: what was agreed. */
export function EffectView({ change, effect, mine }: EffectViewProps) {
  const { before, after } = effect;
  const { steps } = change;
  const who = funding(effect.funding, mine);
  const effects = [
    { name: 'Contract sum', before: <Money cents={before.contractSumCents} />, after: <Figure label="Contract sum after signing" steps={steps?.contractSum}><Money cents={after.contractSumCents} /></Figure> },
    { name: 'Finished by', before: writtenDate(before.completionDate), after: <Figure label="Completion date after signing" steps={steps?.completionDate}>{writtenDate(after.completionDate)}</Figure> },
    ...moneyEffect(change, effect, mine),
    { name: 'Who pays it', before: who.before, after: <Figure label={mine ? 'Your part of that draw' : "The homeowner's part of that draw"} steps={steps?.homeowner}>{who.after}</Figure> },
  ];
  return (
    <Section title={change.state === 'approved' ? 'What it did' : 'What it does'} ruled={false}>
      <Effects effects={effects} />
      {effect.needsLendersWord && change.state !== 'approved' ? (
        <p className="quiet" style={{ marginTop: 8 }}>
          The loan asks for the lender&apos;s agreement to a change of this size. Until it agrees, the change is {mine ? 'yours' : "the homeowner's"} to pay.
        </p>
      ) : null}
    </Section>
  );
}

/** The first draw in which it is asked for; without a schedule of values, what is left to bill. */
function moneyEffect({ milestoneName, steps }: Change, { before, after, nextDraw }: EffectViewProps['effect'], mine: boolean): { name: string; before: ReactNode; after: ReactNode }[] {
  if (nextDraw) {
    const name = `${mine ? 'Your draw' : 'Draw'} ${milestoneName ? `once ${milestoneName} is proven` : 'that comes next'}`;
    return [{ name, before: <Money cents={nextDraw.before.dueNowCents} />, after: <Figure label={name} steps={steps?.nextDraw}><Money cents={nextDraw.after.dueNowCents} /></Figure> }];
  }
  if (before.leftToBillCents === null || after.leftToBillCents === null) return [];
  return [{ name: 'Left to bill', before: <Money cents={before.leftToBillCents} />, after: <Figure label="Left to bill after signing" steps={steps?.leftToBill}><Money cents={after.leftToBillCents} /></Figure> }];
}
