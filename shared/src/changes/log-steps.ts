import { given, money, step, type Step } from '../arithmetic/index.ts';
import { sum, type Cents } from '../money/index.ts';

export interface LoggedChange {
  id: string;
  /** "Change 3A". */
  label: string;
  chargedCents: Cents;
}

/** What the signed changes come to. Throws InvalidInput. */
export function signedSteps(changes: readonly LoggedChange[]): Step {
  return step('Signed so far', 'sum of the signed changes', money(sum(changes.map(({ chargedCents }) => chargedCents))), changes.map(({ id, label, chargedCents }) => given(label, money(chargedCents), { record: 'change', id, label })));
}

/** The contract sum as it stands today. Throws InvalidInput. */
export function contractSumSteps(job: { id: string; name: string; asSignedCents: Cents; changesApprovedCents: Cents }): Step {
  return step('Contract sum today', 'as signed + changes approved', money(sum([job.asSignedCents, job.changesApprovedCents])), [
    given('As signed', money(job.asSignedCents), { record: 'job', id: job.id, label: job.name }),
    given('Changes approved', money(job.changesApprovedCents)),
  ]);
}
