import { queryOptions } from '@tanstack/react-query';
import type { JobCashAhead, JobMoney } from '@tallypole/shared/schemas/money';
import type { ConfirmReceipt, Payment, PaymentProgress, RecordPayment } from '@tallypole/shared/schemas/payments';
import type { Payouts } from '@tallypole/shared/schemas/payouts';
import { get, post } from '../../../lib/http.ts';

const CONFIRMING_MS = 2_000;
const ON_ITS_WAY_MS = 15_000;

export const moneyQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'money'], queryFn: ({ signal }) => get<JobMoney>(`jobs/${jobId}/money`, signal) });
export const aheadQuery = (jobId: string) => queryOptions({ queryKey: ['jobs', jobId, 'money', 'ahead'], queryFn: ({ signal }) => get<JobCashAhead>(`jobs/${jobId}/money/ahead`, signal) });

/** One payment, asked for until it is decided. */
export const progressQuery = (jobId: string, paymentId: string) =>
  queryOptions({
    queryKey: ['jobs', jobId, 'payments', paymentId],
    queryFn: ({ signal }) => get<PaymentProgress>(`jobs/${jobId}/payments/${paymentId}`, signal),
    refetchInterval: ({ state }) => {
      const now = state.data?.payment.state;
      return now === 'started' ? CONFIRMING_MS : now === 'processing' ? ON_ITS_WAY_MS : false;
    },
  });

export const recordPayment = (jobId: string, body: RecordPayment, idempotencyKey: string): Promise<{ payments: Payment[] }> => post(`jobs/${jobId}/payments`, body, { idempotencyKey });
export const confirmReceipt = (jobId: string, paymentId: string, body: ConfirmReceipt, idempotencyKey: string): Promise<{ payments: Payment[] }> =>
  post(`jobs/${jobId}/payments/${paymentId}/receipt`, body, { idempotencyKey });

const PREPARING_MS = 1_000;
export const payoutsQuery = (firmId: string, waiting: boolean) =>
  queryOptions({ queryKey: ['payouts', firmId], queryFn: ({ signal }) => get<Payouts>(`firms/${firmId}/payouts`, signal), refetchInterval: waiting ? PREPARING_MS : ON_ITS_WAY_MS });
export const setUpPayouts = (firmId: string, idempotencyKey: string): Promise<Payouts> => post<Payouts>(`firms/${firmId}/payouts`, {}, { idempotencyKey });
