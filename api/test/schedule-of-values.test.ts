import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import ExcelJS from 'exceljs';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { v7 } from 'uuid';
import { readScheduled } from '@tallypole/shared/schedule-of-values';
import type { ImportSchedule, SchedulePreview, ScheduleOfValues } from '@tallypole/shared/schemas/schedule-of-values';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';
import { importable } from './support/schedule-builders.ts';
import { upload } from './support/uploads.ts';
import type { Visitor } from './support/visitor.ts';
import { workbook } from './support/workbook.ts';

const sample = (name: string): Buffer => readFileSync(path.join(import.meta.dirname, 'samples', name));
const QUARRY_CENTS = 48_650_000;
const problemOf = (body: unknown) => body as { code: string; detail?: string; errors?: { pointer: string; message: string }[] };

describe('the schedule of values', () => {
  let house: House;
  let principal: Visitor;
  let firmId: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    const { url } = await house.web();
    ({ principal, firmId } = await principalWithFirm(house, url));
  });
  afterAll(() => house.close());

  const job = async (contractSumCents = QUARRY_CENTS) => (await createJob(principal, firmId, { contractSumCents })).id;
  const preview = (jobId: string, name: string, content: Buffer, fields: Record<string, string> = {}, visitor = principal) => upload(visitor, `/jobs/${jobId}/schedule/preview`, fields, { name, content });

  it.each(['schedule-quarry.csv', 'schedule-quarry.xlsx'])('reads %s from a spreadsheet program whole and without a problem', async (name) => {
    const jobId = await job();
    const answer = await preview(jobId, name, sample(name));
    expect(answer.status).toBe(200);
    const seen = answer.body as SchedulePreview;
    expect(seen).toMatchObject({ headerRow: 4, sumCents: QUARRY_CENTS, differenceCents: 0, problems: [] });
    expect(seen.lines).toHaveLength(50);
    expect(seen.lines[18]).toMatchObject({ number: '19', description: 'Siding, "board & batten"', milestone: 'Dry-in' });
    expect(seen.lines.filter(({ kind }) => kind === 'allowance').map(({ number }) => number)).toEqual(['31', '32', '37', '38']);
    expect(seen.lines.filter(({ milestone }) => milestone === '')).toHaveLength(5);
    expect(seen.milestones.map(({ name: milestone }) => milestone)).toEqual(['Site and foundation', 'Floor and frame', 'Dry-in', 'Rough-in', 'Insulation and drywall', 'Finishes', 'Completion']);
    expect(seen.milestones.at(-1)?.plannedOn).toBe('2027-06-30');
    const rows = await house.sql<{ n: number }>('select count(*)::int as n from schedule_line where job_id = $1', [jobId]);
    expect(rows).toEqual([{ n: 0 }]);
  });

  it('says how much is missing when a line is, although the stored total says otherwise, and does not import it', async () => {
    const jobId = await job();
    const seen = (await preview(jobId, 'schedule-one-line-short.xlsx', sample('schedule-one-line-short.xlsx'))).body as SchedulePreview;
    expect(seen.lines).toHaveLength(49);
    expect(seen.differenceCents).toBeGreaterThan(0);
    expect(seen.problems).toEqual([expect.objectContaining({ row: 62, column: 'D', severity: 'note', message: expect.stringContaining('The total says $486,500.00') as unknown })]);
    const answer = await principal.post(`/jobs/${jobId}/schedule`, importable(seen));
    expect([answer.status, problemOf(answer.body).code]).toEqual([422, 'rule_broken']);
    expect(problemOf(answer.body).errors?.[0]?.message).toMatch(/missing\.$/);
    expect(((await principal.get(`/jobs/${jobId}/schedule`)).body as ScheduleOfValues).lines).toEqual([]);
  });

  it('imports phases as milestones in building order, once per key, and shows them to whom they concern', async () => {
    const jobId = await job();
    const body = importable((await preview(jobId, 's.csv', sample('schedule-quarry.csv'))).body as SchedulePreview);
    const key = v7();
    const answers = await Promise.all([principal.post(`/jobs/${jobId}/schedule`, body, key), principal.post(`/jobs/${jobId}/schedule`, body, key)]);
    expect(answers.map(({ status }) => status)).toEqual([201, 201]);
    const schedule = answers[0].body as ScheduleOfValues;
    expect(schedule).toMatchObject({ sumCents: QUARRY_CENTS, contractSumTodayCents: QUARRY_CENTS, differenceCents: 0 });
    expect(schedule.milestones.map(({ name }) => name)[0]).toBe('Site and foundation');
    expect(schedule.lines.filter(({ milestoneId }) => milestoneId === null).map(({ phase }) => phase)).toEqual(Array.from({ length: 5 }, () => 'General'));
    const [lender, inspector] = [await join(principal, jobId, 'lender'), await join(principal, jobId, 'inspector')];
    expect((await lender.get(`/jobs/${jobId}/schedule`)).body).toEqual(schedule);
    expect((await inspector.get(`/jobs/${jobId}/schedule`)).status).toBe(403);
    expect((await preview(jobId, 's.csv', sample('schedule-quarry.csv'), {}, lender)).status).toBe(403);
    expect((await lender.post(`/jobs/${jobId}/schedule`, body)).status).toBe(403);
    const record = await house.sql<{ data: { data: object } }>(`select data from record_entry where job_id = $1 and data->>'act' = 'schedule_of_values.imported'`, [jobId]);
    expect(record).toHaveLength(1);
  });

  it('replaces a schedule only while nothing rests on it', async () => {
    const jobId = await job();
    const seen = (await preview(jobId, 's.csv', sample('schedule-quarry.csv'))).body as SchedulePreview;
    expect((await principal.post(`/jobs/${jobId}/schedule`, importable(seen))).status).toBe(201);
    expect((await principal.post(`/jobs/${jobId}/schedule`, importable(seen))).status).toBe(201);
    expect(((await principal.get(`/jobs/${jobId}/schedule`)).body as ScheduleOfValues).replaceable).toBe(true);
    await house.sql(`update milestone set state = 'under_way' where job_id = $1 and position = 1`, [jobId]);
    const late = await principal.post(`/jobs/${jobId}/schedule`, importable(seen));
    expect([late.status, problemOf(late.body).code]).toEqual([409, 'wrong_state']);
    const kept = (await principal.get(`/jobs/${jobId}/schedule`)).body as ScheduleOfValues;
    expect([kept.lines.length, kept.replaceable]).toEqual([50, false]);
  });

  it('refuses lines that point at no milestone of theirs and milestones without a line', async () => {
    const jobId = await job();
    const body = importable((await preview(jobId, 's.csv', sample('schedule-quarry.csv'))).body as SchedulePreview);
    const astray: ImportSchedule = { ...body, lines: body.lines.map((line, i) => (i === 3 ? { ...line, milestoneId: v7() } : line)) };
    expect(problemOf((await principal.post(`/jobs/${jobId}/schedule`, astray)).body).errors?.[0]?.pointer).toBe('/lines/3/milestoneId');
    const idle: ImportSchedule = { ...body, milestones: [...body.milestones, { id: v7(), name: 'Nothing', plannedOn: null }] };
    expect(problemOf((await principal.post(`/jobs/${jobId}/schedule`, idle)).body).errors?.[0]?.pointer).toBe('/milestones/7/name');
  });

  describe('as spreadsheet programs and people write it', () => {
    const LINES = [['1', 'Frame', 'Studs, 2x6', '1200.50'], ['2', 'Frame', 'Façade ties', '799.50']];
    const text = (delimiter: string, lines = LINES) => [['No.', 'Phase', 'Description', 'Scheduled value'], ...lines].map((row) => row.map((cell) => (cell.includes(delimiter) ? `"${cell}"` : cell)).join(delimiter)).join('\r\n');

    it.each([
      ['with a byte order mark', Buffer.from(`\ufeff${text(',')}`)],
      ['with semicolons', Buffer.from(text(';'))],
      ['with tabs, as UTF-16', Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(text('\t'), 'utf16le')])],
      ['as Windows-1252', Buffer.from(text(','), 'latin1')],
      ['with currency signs and separators', Buffer.from(text(',', [['1', 'Frame', 'Studs, 2x6', '$1,200.50'], ['2', 'Frame', 'Façade ties', ' 799.50 USD']]))],
    ])('reads CSV %s', async (_how, content) => {
      const jobId = await job(200_000);
      const seen = (await preview(jobId, 'lines.csv', content)).body as SchedulePreview;
      expect(seen.lines.map(({ description }) => description)).toEqual(['Studs, 2x6', 'Façade ties']);
      expect(seen.lines.map(({ scheduled }) => readScheduled(scheduled))).toEqual([120_050, 79_950]);
      expect([seen.differenceCents, seen.problems]).toEqual([0, []]);
    });

    it('takes formulas by their result, and one that shows an error as a problem of its cell', async () => {
      const book = new ExcelJS.Workbook();
      book.addWorksheet('Notes').addRow(['Prices good for 30 days']);
      const sheet = book.addWorksheet('Schedule');
      sheet.addRow(['No.', 'Phase', 'Description', 'Scheduled value']);
      sheet.addRow([1, 'Frame', { richText: [{ text: 'Studs' }, { text: ', 2x6' }] }, { formula: 'A2*0.1+0.2', result: 0.1 + 0.2 }]);
      sheet.addRow([2, 'Frame', 'Ties', { formula: 'B9*2', result: { error: '#REF!' } }]);
      sheet.addRow([3, 'Frame', 'Plates', { formula: 'D2*2' }]);
      sheet.getRow(4).hidden = true;
      const jobId = await job(200_000);
      const seen = (await preview(jobId, 'lines.xlsx', Buffer.from(await book.xlsx.writeBuffer()))).body as SchedulePreview;
      expect([seen.sheet, seen.sheets]).toEqual(['Schedule', ['Notes', 'Schedule']]);
      expect(seen.lines[0]).toMatchObject({ description: 'Studs, 2x6', scheduled: '0.3' });
      expect(seen.problems.map(({ row, column, severity }) => `${severity} ${column ?? ''}${row}`)).toEqual(['error D3', 'error D4', 'note 4']);
      const other = await preview(jobId, 'lines.xlsx', Buffer.from(await book.xlsx.writeBuffer()), { sheet: 'Notes' });
      expect([other.status, problemOf(other.body).code]).toEqual([422, 'unreadable_file']);
    });
  });

  describe('refuses what it cannot read, and stays up', () => {
    it.each([
      ['a picture called CSV', 'lines.csv', Buffer.from([0xff, 0xd8, 0xff, 0xe0, 0, 16, 0x4a, 0x46]), 415],
      ['a table without a header', 'lines.csv', Buffer.from('a,b\n1,2\n'), 422],
      ['a header without lines', 'lines.csv', Buffer.from('Description,Scheduled value\n'), 422],
      ['a quote that is never closed', 'lines.csv', Buffer.from(`Description,Scheduled value\n"${'x'.repeat(200_000)}`), 422],
      ['too many rows', 'lines.csv', Buffer.from(`Description,Scheduled value\n${'a,1\n'.repeat(6_000)}`), 422],
      ['too many columns', 'lines.csv', Buffer.from(`Description,Scheduled value${',x'.repeat(100)}\na,1\n`), 422],
      ['more than 5 MB', 'lines.csv', Buffer.alloc(6_000_000, 'a'), 413],
      ['a ZIP that is no workbook', 'lines.xlsx', Buffer.from([0x50, 0x4b, 0x03, 0x04, 1, 2, 3, 4]), 422],
    ])('%s', async (_what, name, content, status) => {
      const answer = await preview(await job(), name, content);
      expect([answer.status, problemOf(answer.body).detail !== undefined]).toEqual([status, true]);
    });

    it('a workbook that unpacks to far more than it weighs, whatever it claims to unpack to', async () => {
      const rows = `<row r="2"><c r="A2" t="inlineStr"><is><t>${'bomb '.repeat(8_000_000)}</t></is></c></row>`;
      const content = workbook(rows, { claimedBytes: 1_000 });
      expect(content.length).toBeLessThan(100_000);
      const answer = await preview(await job(), 'bomb.xlsx', content);
      expect([answer.status, problemOf(answer.body).detail]).toEqual([422, 'The workbook is too large once it is unpacked. Keep the schedule alone in it.']);
    });

    it('a workbook that asks for a merged cell as large as the sheet', async () => {
      const jobId = await job();
      const content = workbook('', { afterRows: '<mergeCells count="1"><mergeCell ref="A3:XFD1048576"/></mergeCells>' });
      const [answer] = await Promise.all([preview(jobId, 'merged.xlsx', content), principal.get(`/jobs/${jobId}`)]);
      expect([answer.status, problemOf(answer.body).detail]).toEqual([422, 'The workbook takes too much to read. Copy the schedule alone into a new one.']);
      expect((await principal.get(`/jobs/${jobId}`)).status).toBe(200);
    });
  });

  it('tells a stranger nothing, with or without a file', async () => {
    const jobId = await job();
    const { principal: stranger } = await principalWithFirm(house, principal.url);
    expect((await preview(jobId, 's.csv', sample('schedule-quarry.csv'), {}, stranger)).status).toBe(404);
    expect((await stranger.get(`/jobs/${jobId}/schedule`)).status).toBe(404);
  });
});
