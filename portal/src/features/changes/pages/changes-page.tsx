import { useSuspenseQuery } from '@tanstack/react-query';
import { given, money } from '@tallypole/shared/arithmetic';
import { signedSteps } from '@tallypole/shared/changes';
import type { ChangeRow } from '@tallypole/shared/schemas/changes';
import { may } from '@tallypole/shared/schemas/permissions';
import { Link } from 'react-router-dom';
import { writtenDate } from '../../../lib/dates.ts';
import { useJob } from '../../../lib/job.ts';
import { DataTable, type Column } from '../../../ui/data-table.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { LinkButton } from '../../../ui/link-button.tsx';
import { MoneyChange } from '../../../ui/money.tsx';
import { EmptyState, PageHead } from '../../../ui/page.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { changesQuery } from '../api/changes.ts';
import { changeName, forSite, states, strings } from '../strings.ts';

/** The change log: every change with its state, and what the signed ones come to. Without prices for the site. */
export function Component() {
  const job = useJob();
  const { data } = useSuspenseQuery(changesQuery(job.id));
  const prices = may(job.roles, 'money.read');
  const mayPrice = may(job.roles, 'change.price');
  const state = (row: ChangeRow) => (prices ? states[row.state] : forSite(row.state));
  const columns: Column<ChangeRow>[] = [
    { key: 'name', head: 'Change', cell: (row) => <Link to={row.id}>{`${changeName(row)}: ${row.title}`}</Link> },
    { key: 'state', head: prices ? 'State' : 'On site', cell: (row) => <StateTag meaning={state(row).meaning}>{state(row).words}</StateTag> },
    { key: 'where', head: 'Milestone', cell: (row) => row.milestoneName ?? 'The whole job' },
    ...(prices ? [{ key: 'until', head: 'Price holds until', cell: (row: ChangeRow) => (row.state === 'issued' || row.state === 'partly_signed' ? writtenDate(row.goodUntil) : '–') }] : []),
    { key: 'days', head: 'Days', right: true, cell: (row) => row.days },
    ...(prices ? [{ key: 'price', head: 'Price', right: true, cell: (row: ChangeRow) => <Price row={row} /> }] : []),
  ];
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.hint}</p>
        {mayPrice ? (
          <div>
            <LinkButton to="new">Price a change</LinkButton>
          </div>
        ) : null}
      </PageHead>
      {data.items.length === 0 ? <EmptyState>{strings.empty}</EmptyState> : <DataTable caption="Changes" columns={columns} rows={data.items} rowKey={({ id }) => id} />}
      {data.approvedCents === null || data.items.length === 0 ? null : (
        <p style={{ marginTop: 16 }}>
          Signed so far: <Figure label="Signed so far" steps={signedSteps(data.items.filter(({ state }) => state === 'approved').map(logged))}><MoneyChange cents={data.approvedCents} /></Figure> and {data.approvedDays === 1 ? '1 day' : `${data.approvedDays} days`}.
        </p>
      )}
    </>
  );
}

const logged = (row: ChangeRow) => ({ id: row.id, label: changeName(row), chargedCents: row.chargedCents ?? 0 });

/** The price opens to the change it stands in, where its lines open in turn. */
function Price({ row }: { row: ChangeRow }) {
  const { id, label, chargedCents } = logged(row);
  return <Figure label={`${label}, price`} steps={given(label, money(chargedCents), { record: 'change', id, label })}><MoneyChange cents={chargedCents} /></Figure>;
}
