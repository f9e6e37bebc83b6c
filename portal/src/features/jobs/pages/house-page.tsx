import { useSuspenseQuery } from '@tanstack/react-query';
import type { House } from '@tallypole/shared/schemas/house';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { contractSumSteps } from '@tallypole/shared/changes';
import { may } from '@tallypole/shared/schemas/permissions';
import { writtenDate } from '../../../lib/dates.ts';
import { houseQuery } from '../../../lib/house.ts';
import { useJob } from '../../../lib/job.ts';
import { Figure } from '../../../ui/figure.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { Money } from '../../../ui/money.tsx';
import { EmptyState, PageHead, Section } from '../../../ui/page.tsx';
import { WaitRow } from '../../../ui/waits.tsx';
import { whereItStands } from '../where-it-stands.ts';

/** Where the house stands, what waits for whom, and what comes next. */
export function Component() {
  const job = useJob();
  const { data: house } = useSuspenseQuery(houseQuery(job.id));
  const mine = house.waits.filter((wait) => wait.mine);
  const others = house.waits.filter((wait) => !wait.mine);
  return (
    <>
      <PageHead title={whereItStands(house)}>
        <Facts job={job} />
      </PageHead>
      <Beginning job={job} house={house} />
      {mine.map((wait) => (
        <WaitRow key={`${wait.kind} ${wait.id}`} wait={wait} jobId={job.id} />
      ))}
      {mine.length === 0 && house.pole.milestones.length > 0 ? <NothingMine house={house} /> : null}
      {others.length > 0 ? (
        <Section title="Waiting for others">
          {others.map((wait) => (
            <WaitRow key={`${wait.kind} ${wait.id}`} wait={wait} jobId={job.id} />
          ))}
        </Section>
      ) : null}
    </>
  );
}

function Facts({ job }: { job: Job }) {
  const arithmetic = contractSumSteps({ id: job.id, name: job.name, asSignedCents: job.contractSumCents, changesApprovedCents: job.approvedChangesCents });
  return (
    <p className="quiet">
      {may(job.roles, 'money.read') ? (
        <>
          Contract sum today{' '}
          <Figure label="Contract sum today" steps={arithmetic}>
            <Money cents={job.contractSumTodayCents} />
          </Figure>{' '}
          ·{' '}
        </>
      ) : null}
      finished by {writtenDate(job.completionDate)}
    </p>
  );
}

function NothingMine({ house }: { house: House }) {
  const { next } = house;
  return (
    <p>
      Nothing waits for you.{' '}
      {next ? `Next comes ${next.name}${next.on ? `, planned for ${writtenDate(next.on)}` : ''}.` : 'Every milestone is proven.'}
    </p>
  );
}

/** A new job needs its schedule of values first. */
function Beginning({ job, house }: { job: Job; house: House }) {
  if (house.pole.milestones.length > 0 || house.pole.general.scheduledCents > 0) return null;
  const imports = may(job.roles, 'schedule_of_values.import');
  return (
    <EmptyState action={imports ? <LinkButton to={`/jobs/${job.id}/schedule/import`}>Import the schedule of values</LinkButton> : undefined}>
      {imports ? 'The schedule of values comes first: its phases become the milestones that changes and draws hang on.' : 'Your builder has not entered the schedule of values yet. Once it is in, you see here how the house stands.'}
    </EmptyState>
  );
}
