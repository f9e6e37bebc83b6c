import { useQuery } from '@tanstack/react-query';
import { lineValue, phasesOf, scheduleSum, type Phase } from '@tallypole/shared/schedule-of-values';
import { may } from '@tallypole/shared/schemas/permissions';
import type { ScheduleLine, ScheduleOfValues } from '@tallypole/shared/schemas/schedule-of-values';
import { useJob } from '../../../lib/job.ts';
import { Figure } from '../../../ui/figure.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { Money } from '../../../ui/money.tsx';
import { EmptyState, FailureState, LoadingState, PageHead } from '../../../ui/page.tsx';
import { scheduleQuery } from '../api/schedule.ts';
import classes from '../components/schedule.module.css';
import { strings } from '../strings.ts';

/** The schedule of values by phase; every sum opens to its lines. */
export function Component() {
  const job = useJob();
  const { data, error, refetch } = useQuery(scheduleQuery(job.id));
  const mayImport = may(job.roles, 'schedule_of_values.import');
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      {error ? <FailureState error={error} onRetry={() => void refetch()} /> : data ? <Schedule schedule={data} mayImport={mayImport} /> : <LoadingState />}
    </>
  );
}

function Schedule({ schedule, mayImport }: { schedule: ScheduleOfValues; mayImport: boolean }) {
  if (schedule.lines.length === 0) {
    return <EmptyState action={mayImport ? <LinkButton to="import">{strings.importLink}</LinkButton> : null}>{mayImport ? strings.empty : strings.emptyForReader}</EmptyState>;
  }
  const phases = phasesOf(schedule.lines);
  return (
    <>
      {phases.map((phase) => <PhaseTable key={phase.name} phase={phase} />)}
      <div className={classes['total']}>
        <span>{strings.total}</span>
        <Figure steps={scheduleSum(phases)} label={strings.title}>
          <Money cents={schedule.sumCents} />
        </Figure>
      </div>
      {schedule.differenceCents === 0 ? <p className="quiet">{strings.addsUp}</p> : null}
      {mayImport && schedule.replaceable ? <div style={{ marginTop: 16 }}><LinkButton to="import" variant="subtle">{strings.importAgain}</LinkButton></div> : null}
    </>
  );
}

function PhaseTable({ phase }: { phase: Phase<ScheduleLine> }) {
  const { sum, name, lines } = phase;
  return (
    <table className={classes['phase']}>
      <caption>{name}</caption>
      <thead>
        <tr>
          <th scope="col" className={classes['no']}>{strings.columns.number}</th>
          <th scope="col">{strings.columns.description}</th>
          <th scope="col" className={classes['sum']}>{strings.columns.scheduled}</th>
        </tr>
      </thead>
      <tbody>
        {lines.map((line) => {
          const { id, number, description, kind, scheduledCents } = line;
          return (
          <tr key={id}>
            <td className={classes['no']}>{number}</td>
            <th scope="row">
              {description}
              {kind === 'base' ? null : <span className={classes['kind']}> · {strings.kinds[kind]}</span>}
            </th>
            <td className={classes['sum']}><Figure steps={lineValue(line)} label={description}><Money cents={scheduledCents} /></Figure></td>
          </tr>
          );
        })}
      </tbody>
      <tfoot>
        <tr>
          <td />
          <th scope="row">{strings.total}</th>
          <td className={classes['sum']}>
            <Figure steps={sum} label={name}><Money cents={sum.result.kind === 'money' ? sum.result.cents : null} /></Figure>
          </td>
        </tr>
      </tfoot>
    </table>
  );
}
