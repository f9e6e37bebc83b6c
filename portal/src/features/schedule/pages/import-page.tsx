import { NativeSelect } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import { sumProblem } from '@tallypole/shared/schedule-of-values';
import { useEffect, useRef, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { dropDraft, keepDraft, readDraft } from '../../../lib/drafts.ts';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { useJobId } from '../../../lib/job.ts';
import { Problem } from '../../../lib/problem.ts';
import { FailureState, PageHead, Section } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { importSchedule } from '../api/import-schedule.ts';
import { previewSchedule } from '../api/preview-schedule.ts';
import { DraftSheet } from '../components/draft-sheet.tsx';
import { FileChoice } from '../components/file-choice.tsx';
import { MilestoneDates } from '../components/milestone-dates.tsx';
import { ProblemList } from '../components/problem-list.tsx';
import { SumBar } from '../components/sum-bar.tsx';
import classes from '../components/schedule.module.css';
import { added, edited, fromPreview, planned, removed, toImport, type ImportState } from '../import-state.ts';
import { strings } from '../strings.ts';

/** From a file to the job's schedule: read, put right, import. */
export function Component() {
  const jobId = useJobId();
  const draft = `schedule-import:${jobId}`;
  const [state, setState] = useState<ImportState | null>(() => readDraft<ImportState>(draft) as ImportState | null);
  const [file, setFile] = useState<File | null>(null);
  const reading = useReading(jobId, (next) => setState(fromPreview(next)));
  useEffect(() => {
    if (state) keepDraft(draft, state);
  }, [draft, state]);
  const read = (chosen: File, sheet?: string) => {
    setFile(chosen);
    void reading.read(chosen, sheet);
  };
  return (
    <>
      <PageHead title={strings.importTitle}>
        <p className="quiet">{state ? strings.read(state.lines.length, state.fileName) : strings.explain}</p>
      </PageHead>
      {reading.failure ? <FailureState error={reading.failure} /> : null}
      <FileChoice busy={reading.busy} again={state !== null} onFile={(chosen) => read(chosen)} />
      {state && file && state.sheets.length > 1 ? (
        <NativeSelect label={strings.sheet} value={state.sheet ?? ''} data={state.sheets} onChange={(event) => read(file, event.currentTarget.value)} maw={320} mt={16} />
      ) : null}
      {state ? <Review jobId={jobId} draft={draft} state={state} onState={(change) => setState((before) => before && change(before))} /> : null}
    </>
  );
}

interface ReviewProps {
  jobId: string;
  draft: string;
  state: ImportState;
  onState: (change: (before: ImportState) => ImportState) => void;
}

function Review({ jobId, draft, state, onState }: ReviewProps) {
  const importing = useImporting(jobId, draft, state);
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (importing.tries > 0) box.current?.focus();
  }, [importing.tries]);
  const wrong = importing.tries > 0 ? (importing.failure?.message ?? (state.check.ready ? null : whatIsWrong(state))) : null;
  return (
    <>
      {wrong ? (
        <div className={classes['summary']} ref={box} tabIndex={-1} role="alert">
          <h2>{strings.problemTitle}</h2>
          <p>{wrong}</p>
        </div>
      ) : null}
      <Section title={strings.lookAt}>
        <ProblemList state={state} />
      </Section>
      <Section title={strings.linesTitle}>
        <DraftSheet
          state={state}
          onEdit={(edits) => onState((before) => edited(before, edits))}
          onAdd={(scheduled) => onState((before) => added(before, scheduled))}
          onRemove={(id) => onState((before) => removed(before, id))}
        />
      </Section>
      <Section title={strings.milestonesTitle}>
        <p className="quiet">{strings.milestonesHint}</p>
        <MilestoneDates milestones={state.milestones} onPlan={(id, day) => onState((before) => planned(before, id, day))} />
      </Section>
      <SumBar check={state.check} lines={state.lines.length} busy={importing.busy} onImport={importing.send} />
    </>
  );
}

const whatIsWrong = ({ check }: ImportState): string => {
  const cells = check.problems.length === 0 ? '' : check.problems.length === 1 ? 'One cell needs another look. ' : `${check.problems.length} cells need another look. `;
  return `${cells}${sumProblem(check) ?? ''}`.trim();
};

function useReading(jobId: string, onRead: (preview: Awaited<ReturnType<typeof previewSchedule>>) => void) {
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<unknown>(null);
  const read = async (file: File, sheet?: string) => {
    setBusy(true);
    setFailure(null);
    try {
      onRead(await previewSchedule(jobId, file, sheet));
    } catch (error) {
      setFailure(error);
    } finally {
      setBusy(false);
    }
  };
  return { busy, failure, read };
}

function useImporting(jobId: string, draft: string, state: ImportState) {
  const idempotency = useIdempotencyKey(`schedule-import:${jobId}`);
  const queries = useQueryClient();
  const navigate = useNavigate();
  const [busy, setBusy] = useState(false);
  const [tries, setTries] = useState(0);
  const [failure, setFailure] = useState<Problem | null>(null);
  const attempt = async () => {
    setFailure(null);
    if (!state.check.ready) {
      setTries((count) => count + 1);
      return;
    }
    setBusy(true);
    try {
      await importSchedule(jobId, toImport(state), idempotency.key);
      idempotency.spend();
      dropDraft(draft);
      await queries.invalidateQueries({ queryKey: ['jobs', jobId] });
      toast(strings.imported);
      await navigate(`/jobs/${jobId}/schedule`);
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
      if (error.code === 'key_reused') idempotency.spend();
      setFailure(error);
      setTries((count) => count + 1);
    } finally {
      setBusy(false);
    }
  };
  return { busy, tries, failure, send: () => void attempt() };
}
