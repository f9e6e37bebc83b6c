import { Button } from '@mantine/core';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useEffectEvent, useState } from 'react';
import { writtenDate } from '../../../lib/dates.ts';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { Problem } from '../../../lib/problem.ts';
import { useNewId } from '../../../ui/forms/index.ts';
import { FailureState } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { getProgress, startPayment } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import classes from './draws.module.css';

const words = strings.pay;
const ASK_EVERY_MS = 700;
const LONG_MS = 8_000;

/** The homeowner's open part and the way to pay it; the payment page is the payment service's own. */
export function PayPart({ job, draw }: { job: Job; draw: Draw }) {
  const mine = draw.payments.filter(({ source, method }) => source === 'homeowner' && method === 'checkout');
  const underWay = mine.find(({ state }) => state === 'processing');
  const last = mine.at(-1);
  if (draw.approvedAt === null) return null;
  if (underWay) return <p className={classes['decide']} role="status">{words.underWay(underWay.amountCents)}</p>;
  if (draw.openHomeownerCents <= 0) return draw.homeownerCents > 0 ? <p className="quiet">{words.paid}</p> : null;
  return (
    <section className={classes['decide']} aria-label={words.title}>
      <h2>{words.title}</h2>
      {last && (last.state === 'failed' || last.state === 'returned') ? <p role="status">{words.failed(last.trouble)}</p> : null}
      <p>{words.explain(draw.openHomeownerCents, writtenDate(draw.dueOn ?? draw.throughOn, true))}</p>
      <PayButton job={job} draw={draw} />
      <p className="quiet">{words.otherWays}</p>
    </section>
  );
}

function PayButton({ job, draw }: { job: Job; draw: Draw }) {
  const id = useNewId(`pay-${draw.id}-${draw.payments.length}`);
  const { key, spend } = useIdempotencyKey(`pay-${draw.id}-${draw.payments.length}`);
  const [paymentId, setPaymentId] = useState<string | null>(null);
  const [failure, setFailure] = useState<unknown>(null);
  const [busy, setBusy] = useState(false);
  const presence = usePresence();
  const pay = async () => {
    if (busy) return;
    setBusy(true);
    setFailure(null);
    try {
      const { payment } = await presence.guard(() => startPayment(job.id, draw.id, { id, amountCents: draw.openHomeownerCents }, key));
      setPaymentId(payment.id);
    } catch (error) {
      setFailure(error);
      spend();
      setBusy(false);
    }
  };
  const over = (error: unknown) => {
    setPaymentId(null);
    setBusy(false);
    setFailure(error);
    spend();
  };
  return (
    <>
      {presence.dialog}
      {failure ? <FailureState error={failure} /> : null}
      <Button loading={busy} onClick={() => void pay()}>
        {words.button(draw.openHomeownerCents)}
      </Button>
      {paymentId === null ? null : <Opening job={job} paymentId={paymentId} onOver={over} />}
    </>
  );
}

/** Asks until the payment page is there, then goes to it. */
function Opening({ job, paymentId, onOver }: { job: Job; paymentId: string; onOver: (error: unknown) => void }) {
  const [slow, setSlow] = useState(false);
  const queries = useQueryClient();
  const end = useEffectEvent((trouble: string | null) => {
    void queries.invalidateQueries({ queryKey: ['jobs', job.id] });
    onOver(trouble === null ? null : new Problem('failed', trouble, 500));
  });
  useEffect(() => {
    const started = Date.now();
    let timer: number | undefined;
    const ask = async () => {
      // where no answer comes the next one says more; what was started stays started
      const found = await getProgress(job.id, paymentId).catch(() => null);
      if (found?.url) {
        window.location.assign(found.url);
        return;
      }
      if (found && found.payment.state !== 'started') {
        end(found.payment.trouble);
        return;
      }
      setSlow(Date.now() - started > LONG_MS);
      timer = window.setTimeout(() => void ask(), ASK_EVERY_MS);
    };
    void ask();
    return () => window.clearTimeout(timer);
  }, [job.id, paymentId]);
  return <p role="status">{slow ? words.openingLong : words.opening}</p>;
}
