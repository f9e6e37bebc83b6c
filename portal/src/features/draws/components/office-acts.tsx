import { Button, Modal } from '@mantine/core';
import { VoidDraw, type Draw } from '@tallypole/shared/schemas/draws';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { Form, TextAreaField, useActForm } from '../../../ui/forms/index.ts';
import { FailureState } from '../../../ui/page.tsx';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';
import classes from './draws.module.css';

interface OfDraw {
  jobId: string;
  draw: Draw;
}

/** One act without fields: sent once, whatever the clicks. */
function useAct(name: string, act: (key: string) => Promise<Draw>, onDone: (draw: Draw) => void) {
  const { key, spend } = useIdempotencyKey(name);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const run = async () => {
    if (busy) return;
    setBusy(true);
    setFailure(null);
    try {
      const draw = await act(key);
      spend();
      onDone(draw);
    } catch (error) {
      spend();
      setFailure(error);
    } finally {
      setBusy(false);
    }
  };
  return { busy, failure, run: () => void run() };
}

export function RedraftButton({ jobId, draw }: OfDraw) {
  const [asking, setAsking] = useState(false);
  const drawn = useDrawn(jobId);
  const { busy, failure, run } = useAct(`draw-redraft-${draw.id}`, (key) => actOnDraw(jobId, draw.id, 'draft', { version: draw.version }, key), (after) => {
    setAsking(false);
    drawn(after);
  });
  return (
    <>
      <Button variant="outline" onClick={() => setAsking(true)}>
        {strings.redraft}
      </Button>
      <Modal opened={asking} onClose={() => setAsking(false)} title={strings.redraft} closeButtonProps={{ 'aria-label': 'Close' }} centered>
        <p style={{ marginBottom: 16 }}>{strings.redraftAsk}</p>
        {failure ? <FailureState error={failure} /> : null}
        <Button loading={busy} onClick={run}>
          {strings.redraft}
        </Button>
      </Modal>
    </>
  );
}

/** Sends the draw as it is after the last edit was saved. */
export function SendDraw({ jobId, draw, blocked, settled }: OfDraw & { blocked: boolean; settled: () => Promise<Draw> }) {
  const drawn = useDrawn(jobId);
  const send = async (key: string) => actOnDraw(jobId, draw.id, 'submit', { version: (await settled()).version }, key);
  const { busy, failure, run } = useAct(`draw-submit-${draw.id}`, send, (after) => drawn(after, strings.sent));
  return (
    <div className={classes['decide']}>
      <p className="quiet">{strings.sendEffect(draw.dueCents, draw.homeownerCents, draw.loanCents)}</p>
      {failure ? <FailureState error={failure} /> : null}
      {blocked ? <p>{strings.notSaved}: look at the marked cells first.</p> : null}
      <Button fullWidth loading={busy} onClick={() => (blocked ? undefined : run())}>
        {strings.send(draw.number)}
      </Button>
    </div>
  );
}

export function VoidForm({ jobId, draw }: OfDraw) {
  const drawn = useDrawn(jobId);
  const act = useActForm({
    name: `draw-void-${draw.id}`,
    initialValues: { reason: '' },
    schema: VoidDraw,
    send: (values, key) => actOnDraw(jobId, draw.id, 'void', values, key),
    onDone: (after) => drawn(after, strings.voided),
  });
  return (
    <details className={classes['history']}>
      <summary>{strings.void}</summary>
      <div className={classes['afterSheet']} />
      <Form act={act} submitLabel={strings.void} color="oxide">
        <TextAreaField field={act.field('reason')} label={strings.voidReason} rows={2} />
      </Form>
    </details>
  );
}
