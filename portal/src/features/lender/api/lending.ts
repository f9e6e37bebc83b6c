import { queryOptions } from '@tanstack/react-query';
import type { Lending } from '@tallypole/shared/schemas/lending';
import type { JobLoan, SetLoan } from '@tallypole/shared/schemas/loans';
import { get, post } from '../../../lib/http.ts';

const ALIVE_MS = 30_000;

export const lendingQuery = queryOptions({ queryKey: ['lending'], queryFn: ({ signal }) => get<Lending>('lending', signal), refetchInterval: ALIVE_MS });
export const loanQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'loan'], queryFn: ({ signal }) => get<JobLoan>(`jobs/${jobId}/loan`, signal) });
export const setLoan = (jobId: string, body: SetLoan, idempotencyKey: string): Promise<JobLoan> => post<JobLoan>(`jobs/${jobId}/loan`, body, { idempotencyKey });
