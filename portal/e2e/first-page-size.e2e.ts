import { readFileSync } from 'node:fs';
import path from 'node:path';
import { gzipSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';

const dist = path.join(import.meta.dirname, '../dist');

interface Chunk {
  file: string;
  css?: string[];
  imports?: string[];
}

/** What a browser loads before a page can be used: the entry, the page's chunk, and everything that they import. */
function loadedFor(page: string): { js: string[]; css: string[] } {
  const manifest = JSON.parse(readFileSync(path.join(dist, '.vite/manifest.json'), 'utf8')) as Record<string, Chunk>;
  const seen = new Set<string>();
  const visit = (name: string): void => {
    if (seen.has(name)) return;
    seen.add(name);
    const chunk = manifest[name];
    if (!chunk) throw new Error(`${name} is not in the manifest.`);
    chunk.imports?.forEach(visit);
  };
  visit('index.html');
  visit(page);
  const chunks = [...seen].map((name) => manifest[name]!);
  return { js: [...new Set(chunks.map(({ file }) => file))], css: [...new Set(chunks.flatMap(({ css }) => css ?? []))] };
}

const kilobytes = (files: string[]): number => files.reduce((sum, file) => sum + gzipSync(readFileSync(path.join(dist, file)), { level: 9 }).length, 0) / 1000;

describe('what a first page weighs, gzipped', () => {
  // 180 kB and 20 kB are the budget of a homeowner's first page; the two pages that a mail leads to carry forms with their schemas
  it.each([
    ['sign-in', 'src/features/auth/pages/sign-in-page.tsx', 180],
    ['the house', 'src/features/jobs/pages/house-page.tsx', 180],
    ['the jobs', 'src/features/jobs/pages/jobs-page.tsx', 180],
    ['a change to decide', 'src/features/changes/pages/change-page.tsx', 220],
    ['a draw to approve', 'src/features/draws/pages/draw-page.tsx', 220],
  ])('%s', (_name, page, most) => {
    const { js, css } = loadedFor(page);
    expect(kilobytes(js)).toBeLessThanOrEqual(most);
    expect(kilobytes(css)).toBeLessThanOrEqual(20);
  });

  it('loads no calendar, sheet, dialog or schema before the house is shown', () => {
    const { js } = loadedFor('src/features/jobs/pages/house-page.tsx');
    expect(js.filter((file) => /calendar|line-sheet|Modal|popup-window|toasts|common-/.test(file))).toEqual([]);
  });
});
