import lighthouse from 'lighthouse';
import path from 'node:path';
import { chromium, type Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { attachReview, issueChange, startChange } from '../../api/test/support/change-builders.ts';
import { approvedDraw, lentJob, type LentJob } from '../../api/test/support/draw-builders.ts';
import { freePort, House } from '../../api/test/support/house.ts';

const RUNS = 3;
const CATEGORIES = ['performance', 'accessibility', 'best-practices'] as const;
const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? Number.NaN;

/** The pages that a mail leads a homeowner to, cold, on a slowed phone: the median of three runs, printed as a table. */
describe('first pages on a slowed phone', () => {
  let house: House;
  let browser: Browser;
  let port: number;
  let url: string;
  let lent: LentJob;
  const pages: [name: string, path: string][] = [];

  beforeAll(async () => {
    house = await House.open({ PORTAL_DIST: path.join(import.meta.dirname, '../dist') });
    ({ url } = await house.web());
    await house.worker({ env: { PUBLIC_URL: url } });
    lent = await lentJob(house, url);
    const draw = await approvedDraw(lent);
    const started = await startChange(lent);
    const change = await issueChange(lent, await attachReview(lent, started.id));
    pages.push(['the house', `/jobs/${lent.job.id}`], ['a draw', `/jobs/${lent.job.id}/draws/${draw.id}`], ['a change to sign', `/jobs/${lent.job.id}/changes/${change.id}`]);
    port = await freePort();
    browser = await chromium.launch({ executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', `--remote-debugging-port=${port}`] });
  });
  afterAll(async () => {
    await browser.close();
    await house.close();
  });

  it('are measured', async () => {
    const lines = ['', '| page | performance (≥ 92) | accessibility (100) | best practices (100) | layout shift (< 0.02) |', '|---|---|---|---|---|'];
    for (const [name, page] of pages) {
      const seen: Record<string, number[]> = {};
      for (let run = 0; run < RUNS; run += 1) {
        const result = await lighthouse(`${url}${page}`, { port, onlyCategories: [...CATEGORIES], extraHeaders: { Cookie: lent.ann.cookie() }, logLevel: 'error' });
        expect(result?.lhr.finalDisplayedUrl).toContain(page);
        for (const category of CATEGORIES) (seen[category] ??= []).push(Math.round((result?.lhr.categories[category]?.score ?? Number.NaN) * 100));
        (seen['shift'] ??= []).push(result?.lhr.audits['cumulative-layout-shift']?.numericValue ?? Number.NaN);
        if (run === 0) for (const { id, score, title } of failing(result?.lhr.audits ?? {})) lines.push(`<!-- ${name}: ${id} ${score} ${title} -->`);
      }
      lines.push(`| ${name} | ${CATEGORIES.map((category) => median(seen[category] ?? [])).join(' | ')} | ${median(seen['shift'] ?? []).toFixed(3)} |`);
    }
    console.log([...lines.filter((line) => !line.startsWith('<!--')), ...lines.filter((line) => line.startsWith('<!--'))].join('\n'));
  });
});

const failing = (audits: Record<string, { id: string; score: number | null; title: string; scoreDisplayMode: string }>) =>
  Object.values(audits).filter(({ score, scoreDisplayMode }) => scoreDisplayMode === 'binary' && score !== null && score < 1);
