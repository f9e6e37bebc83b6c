import { Problem } from '../common/problem.ts';

/** What an imported table may hold at most. */
export const CAPS = {
  rows: 5_000,
  columns: 60,
  sheets: 20,
  cellText: 2_000,
  zipEntries: 200,
  unzippedBytes: 24_000_000,
  /** What reading a workbook may take in its thread. */
  heapMegabytes: 192,
  milliseconds: 10_000,
} as const;

const MESSAGES = {
  rows: `The sheet has more than ${CAPS.rows.toLocaleString('en-US')} rows.`,
  columns: `The sheet has more than ${CAPS.columns} columns.`,
  sheets: `The workbook has more than ${CAPS.sheets} sheets.`,
  unzipped: 'The workbook is too large once it is unpacked. Keep the schedule alone in it.',
  effort: 'The workbook takes too much to read. Copy the schedule alone into a new one.',
} as const;

export const tooMuch = (what: keyof typeof MESSAGES): Problem => new Problem('unreadable_file', { detail: MESSAGES[what] });
