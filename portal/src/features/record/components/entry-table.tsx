import { writtenInstant } from '../../../lib/dates.ts';
import { DataTable } from '../../../ui/data-table.tsx';
import type { WholeRecord } from '../api/record.ts';
import { acts, strings } from '../strings.ts';

type Entry = WholeRecord['entries'][number];
interface Read {
  entry: Entry;
  act: string;
  at: string;
}

/** The newest entry first; each opens to the exact text that was hashed. */
export function EntryTable({ entries, timeZone }: { entries: readonly Entry[]; timeZone: string }) {
  const rows = entries.map((entry): Read => ({ entry, ...(JSON.parse(entry.text) as { act: string; at: string }) })).reverse();
  return (
    <DataTable
      caption={strings.title}
      columns={[
        { key: 'act', head: strings.columns.act, cell: ({ entry, act }: Read) => <What entry={entry} act={act} /> },
        { key: 'by', head: strings.columns.by, cell: ({ entry }: Read) => entry.byName ?? strings.nobody },
        { key: 'at', head: strings.columns.at, cell: ({ at }: Read) => writtenInstant(at, timeZone) },
        { key: 'seq', head: strings.columns.seq, right: true, cell: ({ entry }: Read) => entry.seq },
      ]}
      rows={rows}
      rowKey={({ entry }) => String(entry.seq)}
    />
  );
}

const What = ({ entry, act }: { entry: Entry; act: string }) => (
  <details>
    <summary>{acts[act] ?? act}</summary>
    <p className="quiet" style={{ fontWeight: 400, overflowWrap: 'anywhere', maxWidth: 520 }}>
      {strings.figures}: {entry.text}
      <br />
      SHA-256 {entry.hash}
    </p>
  </details>
);
