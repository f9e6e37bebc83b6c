import { QueryClient } from '@tanstack/react-query';
import { Problem } from './problem.ts';

const STALE_MS = 30_000;
const RETRIES = 2;

/** A refusal is final; only a network or a server that is busy is asked again. */
const worthRetrying = (failures: number, error: Error): boolean => failures < RETRIES && (!(error instanceof Problem) || error.status === 0 || error.status >= 500);

export const queryClient = new QueryClient({
  defaultOptions: { queries: { staleTime: STALE_MS, retry: worthRetrying, refetchOnWindowFocus: true }, mutations: { retry: false } },
});
