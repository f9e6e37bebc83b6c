import { given, money, type Origin } from '@tallypole/shared/arithmetic';
import type { Wait } from '@tallypole/shared/schemas/house';
import { writtenDate } from '../lib/dates.ts';
import { Figure } from './figure.tsx';
import { LinkButton } from './link-button.tsx';
import { Money, MoneyChange } from './money.tsx';
import { ActRow } from './page.tsx';
import { StateTag } from './state-tag.tsx';

const WORDS: Readonly<Record<Wait['kind'], { what: string; mine: string; path: string; record: Origin['record']; sum: string }>> = {
  milestone_to_prove: { what: 'Claimed, waits for proof', mine: 'Look and confirm', path: 'milestones', record: 'milestone', sum: 'value' },
  change_to_decide: { what: 'Waits for a decision', mine: 'Read and decide', path: 'changes', record: 'change', sum: 'price' },
  draw_to_approve: { what: 'Waits for approval', mine: 'Read and approve', path: 'draws', record: 'draw', sum: 'due now' },
  draw_to_pay: { what: 'Waits for payment', mine: 'Pay', path: 'draws', record: 'draw', sum: 'still to pay' },
  draw_to_fund: { what: 'Waits for the loan', mine: 'Look at the proof', path: 'draws', record: 'draw', sum: 'the loan’s part' },
};

/** Where the record of a wait stands. */
const waitPath = (jobId: string, wait: Wait): string => `/jobs/${jobId}/${WORDS[wait.kind].path}/${wait.id}`;

/** One thing that somebody is waited for: what, since when, who, how much, and the way there. */
export function WaitRow({ wait, jobId, jobName }: { wait: Wait; jobId: string; jobName?: string }) {
  const words = WORDS[wait.kind];
  const by = wait.dueOn ? `due ${writtenDate(wait.dueOn, true)}` : `since ${writtenDate(wait.since)}`;
  return (
    <ActRow
      tag={<StateTag meaning={wait.mine ? 'waits' : 'neutral'}>{`${words.what} · ${by}`}</StateTag>}
      title={jobName ? `${wait.title}, ${jobName}` : wait.title}
      sum={wait.cents === null ? undefined : <WaitSum wait={wait} cents={wait.cents} />}
      action={
        <LinkButton to={waitPath(jobId, wait)} variant={wait.mine ? 'filled' : 'outline'}>
          {wait.mine ? words.mine : 'Open'}
        </LinkButton>
      }
    >
      {wait.mine && wait.waitsFor.length === 1 ? 'It is yours.' : `Waited for: ${wait.waitsFor.join(', ')}.`}
    </ActRow>
  );
}

/** The sum opens to the record it stands in, where its arithmetic opens in turn. */
function WaitSum({ wait, cents }: { wait: Wait; cents: number }) {
  const { sum, record } = WORDS[wait.kind];
  return (
    <Figure label={`${wait.title}, ${sum}`} steps={given(`${wait.title}, ${sum}`, money(cents), { record, id: wait.id, label: wait.title })}>
      {wait.kind === 'change_to_decide' ? <MoneyChange cents={cents} /> : <Money cents={cents} />}
    </Figure>
  );
}
