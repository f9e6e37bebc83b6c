import { formatMoney } from '@tallypole/shared/money';
import { may } from '@tallypole/shared/schemas/permissions';
import { writtenDate } from '../../../lib/dates.ts';
import { useJob } from '../../../lib/job.ts';
import { PageHead } from '../../../ui/page.tsx';

export function Component() {
  const job = useJob();
  return (
    <PageHead title={job.name}>
      <p className="quiet">
        {may(job.roles, 'money.read') ? <>Contract sum today {formatMoney(job.contractSumTodayCents)} · </> : null}finished by {writtenDate(job.completionDate)}
      </p>
    </PageHead>
  );
}
