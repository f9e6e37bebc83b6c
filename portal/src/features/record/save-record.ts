import type { RecordChain } from '@tallypole/shared/schemas/record';
import type { WholeRecord } from './api/record.ts';

const HOW =
  'Each hash is the SHA-256 of the hash before it (64 zeros for the first entry), a line feed, and the entry’s text exactly as it stands here, as UTF-8 in small hex digits.';

/** Hands the record to the browser as a file that explains how to check it. */
export function saveRecord(job: string, chain: RecordChain, { head, entries }: WholeRecord): void {
  const content = JSON.stringify({ job, chain, how: HOW, head, entries: entries.map(({ seq, text, hash }) => ({ seq, text, hash })) }, null, 1);
  const link = document.createElement('a');
  link.href = URL.createObjectURL(new Blob([content], { type: 'application/json' }));
  link.download = `record ${job.replace(/[^\p{L}\p{N} -]/gu, '')} ${chain}.json`;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 1_000);
}
