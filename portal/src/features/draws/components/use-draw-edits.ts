import { parseMoney, parseRate } from '@tallypole/shared/money';
import type { AdjustLine, Draw } from '@tallypole/shared/schemas/draws';
import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { v4 } from 'uuid';
import { drawQuery } from '../../../lib/draws.ts';
import { isProblemWith, Problem } from '../../../lib/problem.ts';
import type { CellEdit } from '../../../ui/line-sheet/types.ts';
import { actOnDraw } from '../api/draw-acts.ts';
import { strings } from '../strings.ts';
import { useDrawn } from './use-drawn.ts';

export interface DrawEdits {
  edit: (edits: CellEdit[]) => void;
  /** What was typed and could not be kept, by line and column, with what is wrong with it. */
  refused: ReadonlyMap<string, { text: string; message: string }>;
  status: string;
  failure: Problem | null;
  /** The latest version, for whatever else acts on the draw. */
  settled: () => Promise<Draw>;
}

export const cellKey = (lineId: string, column: string): string => `${lineId} ${column}`;

/** Saves each edit as it is made, one after another, each on the version that the one before gave. */
export function useDrawEdits(jobId: string, draw: Draw): DrawEdits {
  const [refused, setRefused] = useState<ReadonlyMap<string, { text: string; message: string }>>(new Map());
  const [status, setStatus] = useState('');
  const [failure, setFailure] = useState<Problem | null>(null);
  const latest = useRef<Promise<Draw>>(Promise.resolve(draw));
  const drawn = useDrawn(jobId);
  const queries = useQueryClient();
  // drafting again, photos and others' edits give newer versions
  useEffect(() => {
    latest.current = latest.current.then((known) => (draw.version > known.version ? draw : known));
  }, [draw]);

  const save = (typed: ReturnType<typeof readEdits>['typed']) => {
    setStatus(strings.saving);
    const key = v4();
    const lines = typed.map(({ line }) => line);
    const before = latest.current;
    const after = before.then(({ version }) => actOnDraw(jobId, draw.id, 'lines', { version, lines }, key));
    // a refused edit leaves the version as it was; after somebody else's edit the newest one is asked for
    latest.current = after.catch((error: unknown) => (isProblemWith(error, 'stale') ? queries.fetchQuery({ ...drawQuery(jobId, draw.id), staleTime: 0 }) : before));
    void after.then(
      (saved) => {
        setFailure(null);
        setStatus(strings.saved);
        drawn(saved);
      },
      (error: unknown) => {
        const problem = error instanceof Problem ? error : new Problem('failed', strings.notSaved, 500);
        setStatus(strings.notSaved);
        setFailure(problem.errors.length > 0 ? null : problem);
        setRefused((before) => new Map([...before, ...typed.map(({ cell, text }) => [cell, { text, message: problem.errors[0]?.message ?? problem.message }] as const)]));
      },
    );
  };

  const edit = (edits: CellEdit[]) => {
    const { typed, unread } = readEdits(draw, edits);
    setRefused((before) => {
      const after = new Map(before);
      for (const { cell } of typed) after.delete(cell);
      for (const [cell, found] of unread) after.set(cell, found);
      return after;
    });
    if (typed.length > 0) save(typed);
  };
  return { edit, refused, status, failure, settled: () => latest.current };
}

/** What people typed as lines to send; what can't be read stays with its message. */
function readEdits(draw: Draw, edits: readonly CellEdit[]) {
  const typed: { cell: string; text: string; line: AdjustLine }[] = [];
  const unread: [string, { text: string; message: string }][] = [];
  for (const { row, column, text } of edits) {
    const lineId = draw.lines[row]?.lineId;
    if (lineId === undefined) continue;
    const cell = cellKey(lineId, column);
    try {
      if (column === 'rate') typed.push({ cell, text, line: { lineId, workRate: parseRate(text === '' ? '0' : text) } });
      else if (column === 'work') typed.push({ cell, text, line: { lineId, workCents: parseMoney(text === '' ? '0' : text) } });
      else typed.push({ cell, text, line: { lineId, onHandCents: parseMoney(text === '' ? '0' : text) } });
    } catch {
      unread.push([cell, { text, message: column === 'rate' ? strings.badPercent : strings.badSum }]);
    }
  }
  return { typed, unread };
}
