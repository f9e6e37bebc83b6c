import { Button } from '@mantine/core';
import { verifyChain, type ChainVerdict } from '@tallypole/shared/record';
import { useState } from 'react';
import { Note } from '../../../ui/page.tsx';
import type { WholeRecord } from '../api/record.ts';
import { strings } from '../strings.ts';
import { Act } from './act.tsx';

/** Computes the chain anew, here, from what was sent. */
export function Check({ record }: { record: WholeRecord }) {
  const [verdict, setVerdict] = useState<ChainVerdict | null>(null);
  const [busy, setBusy] = useState(false);
  const check = async () => {
    setBusy(true);
    setVerdict(await verifyChain(record.entries, [{ ...record.head, printedIn: 'the head of the record' }]));
    setBusy(false);
  };
  return (
    <div>
      <Act explain={strings.checkExplain}>
        <Button loading={busy} onClick={() => void check()}>
          {strings.check}
        </Button>
      </Act>
      <div role="status" style={{ overflowWrap: 'anywhere', marginBottom: 16 }}>
        {verdict === null ? null : verdict.holds ? <Note>{strings.holds(verdict.head.seq, verdict.head.hash)}</Note> : <Note>{verdict.sentence}</Note>}
      </div>
    </div>
  );
}
