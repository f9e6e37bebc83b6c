import type { Origin } from '@tallypole/shared/arithmetic';

/** Where the record stands that a figure was taken from; null for records without a page of their own. */
export function originPath({ record, id }: Origin, jobId: string | undefined): string | null {
  if (record === 'job') return `/jobs/${id}`;
  if (jobId === undefined) return null;
  const job = `/jobs/${jobId}`;
  switch (record) {
    case 'change':
      return `${job}/changes/${id}`;
    case 'draw':
      return `${job}/draws/${id}`;
    case 'milestone':
      return `${job}/milestones/${id}`;
    case 'line':
      return `${job}/schedule`;
    case 'payment':
      return `${job}/money`;
    case 'loan':
      return `${job}/loan`;
    case 'photo':
    case 'terms':
    case 'worksheet':
    case 'trade':
    case 'table':
      return null;
  }
}
