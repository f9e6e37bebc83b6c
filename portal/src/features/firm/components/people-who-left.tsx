import { useQuery } from '@tanstack/react-query';
import type { PeopleWhoLeft } from '@tallypole/shared/schemas/firms';
import { writtenInstant } from '../../../lib/dates.ts';
import { queryClient } from '../../../lib/query-client.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { FailureState, LoadingState, Section } from '../../../ui/page.tsx';
import { RowList } from '../../../ui/row-list.tsx';
import { StateTag } from '../../../ui/state-tag.tsx';
import { toast } from '../../../ui/toast.ts';
import { erasePerson, whoLeftQuery } from '../api/settings.ts';
import { strings } from '../strings.ts';

type Left = PeopleWhoLeft['items'][number];

const { timeZone } = Intl.DateTimeFormat().resolvedOptions();

/** Who left, and the erasure of what is personal of them. */
export function WhoLeft({ firmId }: { firmId: string }) {
  const { data, error, refetch } = useQuery(whoLeftQuery(firmId));
  if (data?.items.length === 0) return null;
  return (
    <Section title={strings.left}>
      <p className="quiet" style={{ marginBottom: 12 }}>{strings.leftExplain}</p>
      {error ? <FailureState error={error} onRetry={() => void refetch()} /> : null}
      {data ? (
        <RowList
          label={strings.left}
          rows={data.items.map((left) => ({
            key: left.personId,
            name: left.name,
            facts: [left.places.map(({ role, place }) => strings.place(role, place)).join('; '), strings.leftOn(writtenInstant(left.endedAt, timeZone))],
            acts: <Erase firmId={firmId} left={left} />,
          }))}
        />
      ) : (
        <LoadingState lines={2} />
      )}
    </Section>
  );
}

function Erase({ firmId, left: { personId, name, elsewhere, erased } }: { firmId: string; left: Left }) {
  if (erased) return <StateTag meaning="neutral">{strings.erasedAlready}</StateTag>;
  if (elsewhere) return <StateTag meaning="neutral">{strings.elsewhere}</StateTag>;
  return (
    <ActButton
      scope={`erase:${firmId}:${personId}`}
      label={strings.erase}
      about={name}
      variant="subtle"
      send={(key) => erasePerson(firmId, personId, key)}
      onDone={(after) => {
        queryClient.setQueryData(whoLeftQuery(firmId).queryKey, after);
        toast(strings.erased);
      }}
      question={{ title: strings.eraseTitle(name), text: <p>{strings.eraseText}</p>, confirm: strings.eraseConfirm }}
    />
  );
}
