import { queryOptions } from '@tanstack/react-query';
import type { RecordChain, RecordPart } from '@tallypole/shared/schemas/record';
import { get } from '../../../lib/http.ts';

export interface WholeRecord {
  head: RecordPart['head'];
  entries: RecordPart['entries'];
}

/** A chain from its first entry to its head, in as many parts as it takes. */
export const recordQuery = (jobId: string, chain: RecordChain) =>
  queryOptions({
    queryKey: ['jobs', jobId, 'record', chain],
    queryFn: async ({ signal }): Promise<WholeRecord> => {
      const entries: RecordPart['entries'] = [];
      for (;;) {
        const part = await get<RecordPart>(`jobs/${jobId}/record?chain=${chain}&after=${entries.length}`, signal);
        entries.push(...part.entries);
        if (part.entries.length === 0 || entries.length >= part.head.seq) return { head: part.head, entries };
      }
    },
  });
