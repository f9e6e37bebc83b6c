import { useQuery } from '@tanstack/react-query';
import type { Payment } from '@tallypole/shared/schemas/payments';
import { useParams } from 'react-router-dom';
import { useJobId } from '../../../lib/job.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { PaymentTag } from '../../../ui/money-tags.tsx';
import { Money } from '../../../ui/money.tsx';
import { FailureState, LoadingState, PageHead } from '../../../ui/page.tsx';
import { progressQuery } from '../api/payments.ts';
import classes from '../components/payments.module.css';
import { strings } from '../strings.ts';

const words = strings.progress;

/** Where people come back to from the payment page. The truth comes from the server, and this page waits for it. */
export function Component() {
  const jobId = useJobId();
  const { paymentId = '', drawId = '' } = useParams();
  const { data, error, refetch } = useQuery(progressQuery(jobId, paymentId));
  if (error && !data) return <FailureState error={error} onRetry={() => void refetch()} />;
  if (!data) return <LoadingState />;
  const { payment } = data;
  const draw = payment.drawNumber === null ? 'the draw' : `draw ${payment.drawNumber}`;
  return (
    <>
      <PageHead key={payment.state} title={words.title[payment.state]}>
        <div>
          <PaymentTag state={payment.state} />
        </div>
      </PageHead>
      <div className={classes['progress']} aria-live="polite">
        <p className="sum" style={{ fontSize: 26 }}>
          <Money cents={payment.amountCents} />
        </p>
        <p>{sentence(payment, draw)}</p>
        <p className="quiet">
          {words.reference} {payment.id}
        </p>
        <LinkButton to={`/jobs/${jobId}/draws/${drawId}`} variant={payment.state === 'failed' || payment.state === 'canceled' ? 'filled' : 'outline'}>
          {words.back(draw)}
        </LinkButton>
      </div>
    </>
  );
}

function sentence(payment: Payment, draw: string): string {
  switch (payment.state) {
    case 'started':
      return words.started;
    case 'processing':
      return words.processing(payment.amountCents);
    case 'settled':
      return words.settled(payment.amountCents, draw);
    case 'failed':
      return words.failed(payment.trouble);
    case 'canceled':
      return words.canceled;
    case 'refunded':
    case 'returned':
    case 'disputed':
      return words.other(payment.trouble);
  }
}
