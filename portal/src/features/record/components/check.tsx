import { Button, TextInput } from '@mantine/core';
import { InvalidInput } from '@tallypole/shared/arithmetic';
import { verifyChain, type PrintedHead } from '@tallypole/shared/record';
import { useState } from 'react';
import { Note } from '../../../ui/page.tsx';
import type { WholeRecord } from '../api/record.ts';
import { strings } from '../strings.ts';
import { Act } from './act.tsx';
import classes from './record.module.css';

/** Computes the chain anew, here, from what was sent, and compares it with what a paper printed, where its reader enters that. */
export function Check({ record }: { record: WholeRecord }) {
  const [verdict, setVerdict] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const [seq, setSeq] = useState('');
  const [hash, setHash] = useState('');
  const check = async () => {
    setBusy(true);
    setVerdict(await verdictOf(record, printedOn(seq, hash)));
    setBusy(false);
  };
  return (
    <div>
      <Act explain={strings.checkExplain}>
        <Button loading={busy} onClick={() => void check()}>
          {strings.check}
        </Button>
      </Act>
      <details className={classes['paper']}>
        <summary>{strings.paper}</summary>
        <p className="quiet">{strings.paperHint}</p>
        <TextInput label={strings.paperEntry} value={seq} onChange={({ currentTarget }) => setSeq(currentTarget.value)} inputMode="numeric" autoComplete="off" maw={200} />
        <TextInput label={strings.paperHash} value={hash} onChange={({ currentTarget }) => setHash(currentTarget.value)} autoComplete="off" spellCheck={false} />
      </details>
      <div role="status" className={classes['verdict']}>
        {verdict === null ? null : <Note>{verdict}</Note>}
      </div>
    </div>
  );
}

/** The entry and hash that a paper's reader typed; nothing where both are empty. */
const printedOn = (seq: string, hash: string): PrintedHead[] =>
  seq.trim() === '' && hash.trim() === '' ? [] : [{ seq: /^\d+$/.test(seq.trim()) ? Number(seq.trim()) : -1, hash: hash.replace(/\s/g, '').toLowerCase(), printedIn: strings.thePaper }];

async function verdictOf({ entries, head }: WholeRecord, printed: PrintedHead[]): Promise<string> {
  try {
    const verdict = await verifyChain(entries, [{ ...head, printedIn: strings.theHead }, ...printed]);
    if (!verdict.holds) return verdict.sentence;
    return `${strings.holds(verdict.head.seq, verdict.head.hash)}${printed.length > 0 ? ` ${strings.paperAgrees}` : ''}`;
  } catch (error) {
    if (error instanceof InvalidInput) return strings.paperWrong;
    throw error;
  }
}
