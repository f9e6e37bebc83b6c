import { Button } from '@mantine/core';
import { lineSteps } from '@tallypole/shared/draw';
import { formatRate } from '@tallypole/shared/money';
import type { Draw, DrawLine } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useState } from 'react';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { Figure } from '../../../ui/figure.tsx';
import { Money } from '../../../ui/money.tsx';
import { FailureState } from '../../../ui/page.tsx';
import { withdrawObjection } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { ObjectForm } from './object-form.tsx';
import { useDrawn } from './use-drawn.ts';
import classes from './draws.module.css';

interface Props {
  job: Job;
  draw: Draw;
  objects: boolean;
}

/** What is asked, line by line under its milestone; a homeowner who decides can object at any line. */
export function AskedLines({ job, draw, objects }: Props) {
  const asked = draw.lines.filter((line) => line.thisDrawCents !== 0 || line.objection !== null);
  const groups = [...draw.milestones.map(({ id, name }) => ({ id: id, name })), { id: null, name: strings.general }];
  return (
    <>
      {groups.map(({ id, name }) => {
        const lines = asked.filter(({ milestoneId }) => milestoneId === id);
        return lines.length === 0 ? null : (
          <div key={id ?? 'general'} className={classes['milestone']}>
            <h3>{name}</h3>
            <ul className={classes['asked']}>
              {lines.map((line) => (
                <AskedLine key={line.lineId} job={job} draw={draw} line={line} objects={objects} />
              ))}
            </ul>
          </div>
        );
      })}
      <details>
        <summary>{strings.nothingAsked}</summary>
        <ul className={classes['plain']}>
          {draw.lines.filter((line) => !asked.includes(line)).map((line) => (
            <li key={line.lineId}>
              {line.description} <span className="quiet">· {strings.ofScheduled(formatRate(line.billedRate), line.scheduledCents)}</span>
            </li>
          ))}
        </ul>
      </details>
    </>
  );
}

function AskedLine({ job, draw, line, objects }: Props & { line: DrawLine }) {
  const [open, setOpen] = useState(false);
  return (
    <li>
      <div>
        {line.description}
        <div className="quiet">{strings.ofScheduled(formatRate(line.billedRate), line.scheduledCents)}</div>
      </div>
      <div className={classes['sumNow']}>
        <Figure steps={lineSteps({ ...line, id: line.lineId })} label={line.description}>
          <Money cents={line.thisDrawCents} />
        </Figure>
      </div>
      {line.objection ? <Objection job={job} draw={draw} line={line} withdraws={objects} /> : null}
      {objects && !line.objection && line.thisDrawCents > 0 ? (
        <div className={classes['lineActs']}>
          {open ? (
            <ObjectForm jobId={job.id} draw={draw} line={line} onClose={() => setOpen(false)} />
          ) : (
            <Button variant="subtle" size="compact-md" onClick={() => setOpen(true)} aria-label={strings.objectTitle(line.description)}>
              {strings.object}
            </Button>
          )}
        </div>
      ) : null}
    </li>
  );
}

function Objection({ job, draw, line, withdraws }: { job: Job; draw: Draw; line: DrawLine; withdraws: boolean }) {
  const { objection } = line;
  const { key, spend } = useIdempotencyKey(`objection-withdraw-${objection?.id ?? ''}`);
  const [failure, setFailure] = useState<unknown>(null);
  const drawn = useDrawn(job.id);
  if (!objection) return null;
  const withdraw = async () => {
    try {
      drawn(await withdrawObjection(job.id, draw.id, objection.id, key), strings.withdrawn);
    } catch (error) {
      setFailure(error);
    } finally {
      spend();
    }
  };
  return (
    <div className={classes['objection']}>
      <strong>{strings.objection(objection.objectedCents, objection.by)}</strong> {objection.reason}
      {failure ? <FailureState error={failure} /> : null}
      {withdraws ? (
        <div>
          <Button variant="subtle" size="compact-md" onClick={() => void withdraw()}>
            {strings.withdraw}
          </Button>
        </div>
      ) : null}
    </div>
  );
}
