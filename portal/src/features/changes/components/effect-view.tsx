import type { Change } from '@tallypole/shared/schemas/changes';
import { writtenDate } from '../../../lib/dates.ts';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { Effects, Section } from '../../../ui/page.tsx';
import { funding } from '../strings.ts';

/** The whole effect of signing, before → after; each figure opens its arithmetic. */
export function EffectView({ change, effect }: { change: Change; effect: NonNullable<Change['effect']> }) {
  const { before, after } = effect;
  const { steps } = change;
  const who = funding[effect.funding];
  const effects = [
    { name: 'Contract sum', before: <Money cents={before.contractSumCents} />, after: <Figure label="Contract sum after signing" steps={steps?.contractSum}><Money cents={after.contractSumCents} /></Figure> },
    { name: 'Finished by', before: writtenDate(before.completionDate), after: <Figure label="Completion date after signing" steps={steps?.completionDate}>{writtenDate(after.completionDate)}</Figure> },
    { name: 'Left to bill', before: <Money cents={before.leftToBillCents} />, after: <Figure label="Left to bill after signing" steps={steps?.leftToBill}><Money cents={after.leftToBillCents} /></Figure> },
    { name: 'Who pays it', before: who.before, after: who.after },
  ];
  return (
    <Section title="What it does" ruled={false}>
      <Effects effects={effects} />
      {effect.needsLendersWord ? <p className="quiet" style={{ marginTop: 8 }}>The loan asks for the lender&apos;s agreement to a change of this size. Until it agrees, the change is yours to pay.</p> : null}
    </Section>
  );
}
