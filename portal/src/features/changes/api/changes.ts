import { queryOptions } from '@tanstack/react-query';
import type { Change, ChangeList, FirmPricing, SetFirmPricing } from '@tallypole/shared/schemas/changes';
import type { PhotoList } from '@tallypole/shared/schemas/photos';
import { get, post } from '../../../lib/http.ts';

const PAPER_MS = 1_500;
const ALIVE_MS = 20_000;

export const changesQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'changes'], queryFn: ({ signal }) => get<ChangeList>(`jobs/${jobId}/changes`, signal) });

/** One change; asked again soon while its paper is being made, and now and then while it waits for others. */
export const changeQuery = (jobId: string, changeId: string) =>
  queryOptions({
    queryKey: ['jobs', jobId, 'changes', changeId],
    queryFn: ({ signal }) => get<Change>(`jobs/${jobId}/changes/${changeId}`, signal),
    refetchInterval: ({ state: { data } }) => (data && awaitsPaper(data) ? PAPER_MS : data && isOut(data) ? ALIVE_MS : false),
  });

/** The newest photos of the job, to choose among. */
export const jobPhotosQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'photos'], queryFn: ({ signal }) => get<PhotoList>(`jobs/${jobId}/photos?limit=100`, signal) });

export const pricingQuery = (firmId: string) => queryOptions({ queryKey: ['firms', firmId, 'pricing'], queryFn: ({ signal }) => get<FirmPricing>(`firms/${firmId}/pricing`, signal) });
export const setPricing = (firmId: string, input: SetFirmPricing, idempotencyKey: string): Promise<FirmPricing> => post(`firms/${firmId}/pricing`, input, { idempotencyKey });

export const isOut = ({ state }: Change): boolean => state === 'issued' || state === 'partly_signed';
const awaitsPaper = (change: Change): boolean => change.chargedCents !== null && ((isOut(change) && change.document === null) || (change.state === 'approved' && change.signedDocument === null));

/** Sends an act on a change; '' is the change itself. */
export const actOnChange = (jobId: string, changeId: string, act: string, body: object, idempotencyKey: string): Promise<Change> =>
  post<Change>(`jobs/${jobId}/changes${changeId && `/${changeId}`}${act && `/${act}`}`, body, { idempotencyKey });

export const documentUrl = (jobId: string, documentId: string): string => `/api/jobs/${jobId}/documents/${documentId}`;
