import { Button } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import type { Job } from '@tallypole/shared/schemas/jobs';
import type { Payment } from '@tallypole/shared/schemas/payments';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { FailureState } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { confirmReceipt } from '../api/payments.ts';
import { strings } from '../strings.ts';

/** Books has the lender's money that was sent by way of somebody else. */
export function ConfirmButton({ job, payment }: { job: Job; payment: Payment }) {
  const { key, spend } = useIdempotencyKey(`receipt-${payment.id}`);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const queries = useQueryClient();
  const confirm = async () => {
    if (busy) return;
    setBusy(true);
    try {
      await confirmReceipt(job.id, payment.id, { receivedOn: job.today }, key);
      toast(strings.money.confirmed);
      await queries.invalidateQueries({ queryKey: ['jobs', job.id] });
    } catch (error) {
      setFailure(error);
    } finally {
      spend();
      setBusy(false);
    }
  };
  return (
    <>
      {failure ? <FailureState error={failure} /> : null}
      <Button variant="outline" size="compact-md" loading={busy} onClick={() => void confirm()}>
        {strings.money.confirm}
      </Button>
    </>
  );
}
