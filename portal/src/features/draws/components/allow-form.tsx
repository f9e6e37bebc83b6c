import { formatAmount, formatRate, parseRate, sum } from '@tallypole/shared/money';
import { AllowDraw, type Draw, type DrawLine } from '@tallypole/shared/schemas/draws';
import type { Job } from '@tallypole/shared/schemas/jobs';
import { useMemo, useState } from 'react';
import { Form, TextAreaField, useActForm, useNewId } from '../../../ui/forms/index.ts';
import { LineSheet } from '../../../ui/line-sheet/line-sheet.tsx';
import type { CellEdit, SheetColumn } from '../../../ui/line-sheet/types.ts';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { billedLines, photosOf, seenRate } from './proof.ts';
import { useDrawn } from './use-drawn.ts';
import classes from './draws.module.css';

const words = strings.review;
const { columns: titles } = words;

interface Row {
  line: DrawLine;
  seen: string;
  photos: string;
  /** What was typed; the line as billed where nothing was. */
  allowed: string;
}

/** How far the lender takes each line to be, in a sheet; only lines that differ from what is billed are sent. */
export function AllowForm({ job, draw }: { job: Job; draw: Draw }) {
  const id = useNewId(`draw-allow-${draw.id}-${draw.version}`);
  const drawn = useDrawn(job.id);
  const [typed, setTyped] = useState<ReadonlyMap<string, string>>(() => new Map(draw.lines.flatMap(({ lineId, allowedRate }) => (allowedRate === null ? [] : [[lineId, percent(allowedRate)] as const]))));
  const rows = useMemo(() => billedLines(draw).map((line): Row => {
    const seen = seenRate(draw, line);
    return { line, seen: seen === null ? words.byTime : formatRate(seen), photos: String(photosOf(draw, line)), allowed: typed.get(line.lineId) ?? percent(line.billedRate) };
  }), [draw, typed]);
  const unread = rows.some(({ allowed }) => rateOf(allowed) === null);
  const act = useActForm({
    name: `draw-allow-${draw.id}-${draw.version}`,
    initialValues: { note: '', conditions: '' },
    schema: AllowDraw.pick({ note: true, conditions: true }),
    send: ({ note, conditions }, key) => actOnDraw(job.id, draw.id, 'review/allowances', { id, onDate: job.today, note, conditions, lines: changedLines(rows) }, key),
    onDone: (after) => drawn(after, words.allowed),
  });
  const edit = (edits: CellEdit[]) => setTyped((before) => new Map([...before, ...edits.flatMap(({ row, text }) => (rows[row] ? [[rows[row].line.lineId, text] as const] : []))]));
  return (
    <>
      <h3 style={{ margin: '0 0 8px' }}>{words.allow}</h3>
      <p className="quiet">{words.allowExplain}</p>
      <LineSheet label={words.proof} rows={rows} rowKey={({ line }) => line.lineId} columns={COLUMNS} onEdit={edit} />
      <div className={classes['afterSheet']} />
      <Form act={unread ? { ...act, onSubmit: (event) => event?.preventDefault() } : act} submitLabel={words.allowButton}>
        <TextAreaField field={act.field('conditions')} label={words.conditions} hint={words.conditionsHint} rows={2} />
        <TextAreaField field={act.field('note')} label={words.note} rows={2} />
      </Form>
    </>
  );
}

const percent = (rate: number): string => formatRate(rate).replace(' %', '');

function rateOf(text: string): number | null {
  try {
    const rate = parseRate(text);
    return rate <= 10_000 ? rate : null;
  } catch {
    return null;
  }
}

function changedLines(rows: readonly Row[]) {
  return rows.flatMap(({ line, allowed }) => {
    const rate = rateOf(allowed);
    return rate === null || rate === line.billedRate ? [] : [{ lineId: line.lineId, percent: rate, reason: '' }];
  });
}

const COLUMNS: readonly SheetColumn<Row>[] = [
  { key: 'line', title: titles.line, width: '14rem', text: ({ line }) => line.description },
  { key: 'billed', title: titles.billed, width: '8.5rem', align: 'right', text: ({ line }) => formatAmount(sum([line.billedBeforeCents, line.thisDrawCents])) },
  { key: 'rate', title: titles.rate, width: '5.5rem', align: 'right', text: ({ line }) => percent(line.billedRate) },
  { key: 'seen', title: titles.proven, width: '5.5rem', align: 'right', text: ({ seen }) => seen },
  { key: 'photos', title: titles.photos, width: '4.5rem', align: 'right', text: ({ photos }) => photos },
  { key: 'allowed', title: titles.allowed, width: '6rem', align: 'right', edit: true, inputMode: 'decimal', text: ({ allowed }) => allowed, problem: ({ allowed }) => (rateOf(allowed) === null ? strings.badPercent : null) },
];
