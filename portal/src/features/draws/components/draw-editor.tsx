import { formatAmount, formatRate } from '@tallypole/shared/money';
import type { Draw, DrawLine } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useMemo } from 'react';
import { writtenDate } from '../../../lib/dates.ts';
import { LineSheet } from '../../../ui/line-sheet/line-sheet.tsx';
import type { SheetColumn } from '../../../ui/line-sheet/types.ts';
import { FailureState, Note } from '../../../ui/page.tsx';
import { strings } from '../strings.ts';
import { DrawHead } from './draw-head.tsx';
import { DrawSummary } from './draw-summary.tsx';
import { PhotoChoice } from './photo-choice.tsx';
import { RedraftButton, SendDraw, VoidForm } from './office-acts.tsx';
import { cellKey, useDrawEdits, type DrawEdits } from './use-draw-edits.ts';
import classes from './draws.module.css';

const { sheet: titles } = strings;

interface SheetLine {
  line: DrawLine;
  refused: DrawEdits['refused'];
}

/** The firm's sheet of a draw that is not sent, or that came back. */
export function DrawEditor({ job, draw }: { job: Job; draw: Draw }) {
  const edits = useDrawEdits(job.id, draw);
  const rows = useMemo(() => draw.lines.map((line) => ({ line, refused: edits.refused })), [draw.lines, edits.refused]);
  const milestones = useMemo(() => new Map(draw.milestones.map((milestone) => [milestone.id, milestone])), [draw.milestones]);
  const heading = ({ line }: SheetLine): string => {
    const milestone = line.milestoneId === null ? undefined : milestones.get(line.milestoneId);
    if (!milestone) return strings.general;
    if (milestone.provenOn !== null) return `${milestone.name} · proven ${writtenDate(milestone.provenOn)}`;
    return milestone.state === 'upcoming' ? milestone.name : `${milestone.name} · under way, seen ${formatRate(milestone.percent)}`;
  };
  return (
    <>
      <DrawHead draw={draw} />
      {draw.returnReason === null ? null : (
        <Note>
          <strong>{strings.cameBack}</strong> {draw.returnReason}
        </Note>
      )}
      <div className={classes['wide']}>
        <div>
          <LineSheet label={strings.name(draw.number)} rows={rows} rowKey={({ line }) => line.lineId} columns={COLUMNS} onEdit={edits.edit} group={heading} />
          <p className="quiet">{strings.keys}</p>
          <div className={classes['foot']}>
            <RedraftButton jobId={job.id} draw={draw} />
            <span className={classes['status']} role="status">
              {edits.status}
            </span>
          </div>
          {edits.failure ? <FailureState error={edits.failure} /> : null}
          <PhotoChoice job={job} draw={draw} />
        </div>
        <div className={classes['side']}>
          <DrawSummary draw={draw} />
          <SendDraw jobId={job.id} draw={draw} blocked={edits.refused.size > 0} settled={edits.settled} />
        </div>
      </div>
      <VoidForm jobId={job.id} draw={draw} />
    </>
  );
}

const amount = (key: string, title: string, cents: (line: DrawLine) => number): SheetColumn<SheetLine> => ({ key, title, width: '6.4rem', align: 'right', text: ({ line }) => formatAmount(cents(line)) });
const typed = (key: string, title: string, width: string, text: (line: DrawLine) => string): SheetColumn<SheetLine> => ({
  key, title, width, align: 'right', edit: true, inputMode: 'decimal',
  text: ({ line, refused }) => refused.get(cellKey(line.lineId, key))?.text ?? text(line),
  problem: ({ line, refused }) => refused.get(cellKey(line.lineId, key))?.message ?? null,
});

const COLUMNS: readonly SheetColumn<SheetLine>[] = [
  { key: 'line', title: titles.line, width: '13rem', text: ({ line }) => `${line.number} ${line.description}`.trim() },
  amount('scheduled', titles.scheduled, ({ scheduledCents }) => scheduledCents),
  typed('rate', titles.rate, '4.6rem', ({ workRate }) => formatRate(workRate).replace(' %', '')),
  typed('work', titles.work, '6.4rem', ({ workCents }) => formatAmount(workCents)),
  typed('onHand', titles.onHand, '6.2rem', ({ onHandCents }) => formatAmount(onHandCents)),
  amount('before', titles.before, ({ billedBeforeCents }) => billedBeforeCents),
  amount('now', titles.now, ({ thisDrawCents }) => thisDrawCents),
  amount('left', titles.left, ({ leftCents }) => leftCents),
];
