import type { AdjustDraw, AllowDraw, ApproveDraw, Draw, FundDraw, Inspected, ObjectToLine, Redraft, ReturnDraw, SetDrawPhotos, StartDraw, SubmitDraw, VoidDraw } from '@tallypole/shared/schemas/draws';
import type { PaymentProgress, StartPayment } from '@tallypole/shared/schemas/payments';
import { get, post } from '../../../lib/http.ts';

interface Bodies {
  draft: Redraft;
  lines: AdjustDraw;
  photos: SetDrawPhotos;
  submit: SubmitDraw;
  void: VoidDraw;
  objections: ObjectToLine;
  return: ReturnDraw;
  approvals: ApproveDraw;
  'review/inspections': Inspected;
  'review/allowances': AllowDraw;
  'review/fundings': FundDraw;
}

export const startDraw = (jobId: string, body: StartDraw, idempotencyKey: string): Promise<Draw> => post<Draw>(`jobs/${jobId}/draws`, body, { idempotencyKey });

/** Acts on a draw; each answers with the draw as it is afterwards. */
export const actOnDraw = <Act extends keyof Bodies>(jobId: string, drawId: string, act: Act, body: Bodies[Act], idempotencyKey: string): Promise<Draw> =>
  post<Draw>(`jobs/${jobId}/draws/${drawId}/${act}`, body, { idempotencyKey });

export const withdrawObjection = (jobId: string, drawId: string, objectionId: string, idempotencyKey: string): Promise<Draw> =>
  post<Draw>(`jobs/${jobId}/draws/${drawId}/objections/${objectionId}/withdraw`, {}, { idempotencyKey });

export const startPayment = (jobId: string, drawId: string, body: StartPayment, idempotencyKey: string): Promise<PaymentProgress> =>
  post<PaymentProgress>(`jobs/${jobId}/draws/${drawId}/payments`, body, { idempotencyKey });

export const getProgress = (jobId: string, paymentId: string): Promise<PaymentProgress> => get<PaymentProgress>(`jobs/${jobId}/payments/${paymentId}`);
