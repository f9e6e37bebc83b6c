import { Button } from '@mantine/core';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { writtenDate } from '../../../lib/dates.ts';
import { drawQuery } from '../../../lib/draws.ts';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { isProblemWith } from '../../../lib/problem.ts';
import { useNewId } from '../../../ui/forms/index.ts';
import { FailureState, Note } from '../../../ui/page.tsx';
import { usePresence } from '../../../ui/presence/use-presence.tsx';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';
import classes from './draws.module.css';

const words = strings.approve;

/** What approving does, in a sentence, and the button that does exactly that: it carries the hash of what is shown. */
export function ApproveDraw({ job, draw }: { job: Job; draw: Draw }) {
  const id = useNewId(`draw-approve-${draw.effectHash}`);
  const { key, spend } = useIdempotencyKey(`draw-approve-${draw.effectHash}`);
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const presence = usePresence();
  const queries = useQueryClient();
  const drawn = useDrawn(job.id);
  const approve = async () => {
    if (busy) return;
    setBusy(true);
    try {
      const after = await presence.guard(() => actOnDraw(job.id, draw.id, 'approvals', { id, effectHash: draw.effectHash }, key));
      setFailure(null);
      spend();
      drawn(after, after.state === 'submitted' ? words.done : words.complete);
    } catch (error) {
      setFailure(error);
      if (isProblemWith(error, 'effect_changed')) await queries.invalidateQueries({ queryKey: drawQuery(job.id, draw.id).queryKey });
    } finally {
      setBusy(false);
    }
  };
  const others = draw.awaited.map(({ name }) => name).join(' and ');
  return (
    <section className={classes['decide']} aria-label={words.title}>
      {presence.dialog}
      {isProblemWith(failure, 'effect_changed') ? <Note>{words.changed}</Note> : failure ? <FailureState error={failure} /> : null}
      {draw.approvedByMe ? (
        <>
          <h2>{words.done}</h2>
          <p className="quiet">{others ? words.waits(others) : draw.invitedHomeowners > 0 ? words.invited(draw.invitedHomeowners) : ''}</p>
        </>
      ) : (
        <>
          <h2>{words.title}</h2>
          <p>{words.effect(draw.number, draw.dueCents, draw.homeownerCents, draw.loanCents, writtenDate(draw.dueOnIfToday, true))}</p>
          {job.terms.homeownersSign === 'all' && draw.awaited.length > 1 ? <p className="quiet">{words.both}</p> : null}
          <Button loading={busy} onClick={() => void approve()}>
            {words.button(draw.number, draw.homeownerCents)}
          </Button>
        </>
      )}
    </section>
  );
}
