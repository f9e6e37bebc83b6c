import { Button, NativeSelect } from '@mantine/core';
import { useQuery } from '@tanstack/react-query';
import { firmRoles } from '@tallypole/shared/schemas/roles';
import { recordChains, type RecordChain } from '@tallypole/shared/schemas/record';
import { useState } from 'react';
import { useJob } from '../../../lib/job.ts';
import { FailureState, LoadingState, PageHead } from '../../../ui/page.tsx';
import { recordQuery } from '../api/record.ts';
import { Act } from '../components/act.tsx';
import { Check } from '../components/check.tsx';
import { EntryTable } from '../components/entry-table.tsx';
import { saveRecord } from '../save-record.ts';
import { strings } from '../strings.ts';

/** The job's record, to be read, checked and taken along. */
export function Component() {
  const job = useJob();
  const [chain, setChain] = useState<RecordChain>('shared');
  const ofFirm = job.roles.some((role) => (firmRoles as readonly string[]).includes(role));
  const { data, error, refetch } = useQuery(recordQuery(job.id, chain));
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      {ofFirm ? (
        <NativeSelect
          label={strings.which}
          value={chain}
          onChange={({ currentTarget }) => setChain(currentTarget.value === 'firm' ? 'firm' : 'shared')}
          data={recordChains.map((value) => ({ value, label: strings.chains[value] }))}
          maw={360}
          mb={20}
        />
      ) : null}
      {error && !data ? <FailureState error={error} onRetry={() => void refetch()} /> : null}
      {!data && !error ? <LoadingState lines={8} /> : null}
      {data && data.entries.length === 0 ? <p className="quiet">{strings.empty}</p> : null}
      {data && data.entries.length > 0 ? (
        <>
          <Check key={chain} record={data} />
          <Act explain={strings.saveExplain}>
            <Button variant="outline" onClick={() => saveRecord(job.name, chain, data)}>
              {strings.save}
            </Button>
          </Act>
          <EntryTable entries={data.entries} timeZone={job.timeZone} />
        </>
      ) : null}
    </>
  );
}
