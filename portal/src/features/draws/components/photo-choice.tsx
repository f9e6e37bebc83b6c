import { Button } from '@mantine/core';
import { useQueries } from '@tanstack/react-query';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { photosQuery, photoUrl } from '../../../lib/milestones.ts';
import { FailureState, Section } from '../../../ui/page.tsx';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';
import classes from './draws.module.css';

const words = strings.photos;

/** Chooses among the photos of the milestones that this draw bills. */
export function PhotoChoice({ job, draw }: { job: Job; draw: Draw }) {
  const billed = draw.milestones.filter(({ id }) => draw.lines.some((line) => line.milestoneId === id && line.thisDrawCents !== 0));
  const found = useQueries({ queries: billed.map(({ id }) => photosQuery(job.id, id)) });
  const photos = found.flatMap(({ data }, i) => (data?.items ?? []).filter(({ state }) => state !== 'unreadable').map(({ id, note }) => ({ id, alt: note || (billed[i]?.name ?? '') })));
  const [chosen, setChosen] = useState<ReadonlySet<string>>(() => new Set(draw.photos.map(({ id }) => id)));
  const attached = draw.photos.map(({ id }) => id);
  const changed = chosen.size !== attached.length || attached.some((id) => !chosen.has(id));
  const toggle = (id: string) => setChosen((before) => new Set(before.has(id) ? [...before].filter((other) => other !== id) : [...before, id]));
  return (
    <Section title={words.title}>
      <p className="quiet">{photos.length === 0 ? words.none : words.hint}</p>
      <ul className={classes['pick']}>
        {photos.map(({ id, alt }, i) => (
          <li key={id}>
            <label>
              <input type="checkbox" checked={chosen.has(id)} onChange={() => toggle(id)} aria-label={`${alt}, photo ${i + 1}`} />
              <img src={photoUrl(job.id, id, 'small')} alt="" loading="lazy" decoding="async" />
            </label>
          </li>
        ))}
      </ul>
      {photos.length === 0 ? null : (
        <div className={classes['foot']}>
          <AttachButton job={job} draw={draw} photoIds={[...chosen]} changed={changed} />
          {photos.every(({ id }) => chosen.has(id)) ? null : (
            <Button variant="subtle" onClick={() => setChosen(new Set([...chosen, ...photos.map(({ id }) => id)]))}>
              {words.all}
            </Button>
          )}
        </div>
      )}
    </Section>
  );
}

function AttachButton({ job, draw, photoIds, changed }: { job: Job; draw: Draw; photoIds: string[]; changed: boolean }) {
  const { key, spend } = useIdempotencyKey(`draw-photos-${draw.id}-${draw.version}`);
  const [failure, setFailure] = useState<unknown>(null);
  const [busy, setBusy] = useState(false);
  const drawn = useDrawn(job.id);
  const attach = async () => {
    if (busy) return;
    setBusy(true);
    try {
      const after = await actOnDraw(job.id, draw.id, 'photos', { version: draw.version, photoIds }, key);
      setFailure(null);
      drawn(after, words.attached);
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
      <Button variant={changed ? 'filled' : 'outline'} loading={busy} onClick={() => (changed ? void attach() : undefined)}>
        {changed ? words.attach(photoIds.length) : words.attached}
      </Button>
    </>
  );
}
