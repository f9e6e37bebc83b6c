import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { seenOfBilled, type SeenLine } from './index.ts';

describe('what was seen of what is billed', () => {
  it('is what is billed, at most the seen share of the line; general lines as billed', () => {
    expect(seenOfBilled([{ scheduledCents: 100_000, workCents: 80_000, seenRate: 5_000 }, { scheduledCents: 60_001, workCents: 10_000, seenRate: 5_000 }, { scheduledCents: 50_000, workCents: 20_000, seenRate: null }])).toBe(50_000 + 10_000 + 20_000);
  });
  it('never exceeds what is billed, and equals it where all is proven', () => {
    const line = fc.record({ scheduledCents: fc.integer({ min: 0, max: 9_000_000 }), share: fc.integer({ min: 0, max: 100 }), seenRate: fc.option(fc.integer({ min: 0, max: 10_000 }), { nil: null }) }).map(({ scheduledCents, share, seenRate }): SeenLine => ({ scheduledCents, workCents: Math.floor((scheduledCents * share) / 100), seenRate }));
    fc.assert(fc.property(fc.array(line, { maxLength: 40 }), (lines) => {
      const billed = lines.reduce((total, { workCents }) => total + workCents, 0);
      expect(seenOfBilled(lines)).toBeLessThanOrEqual(billed);
      expect(seenOfBilled(lines.map((one) => ({ ...one, seenRate: 10_000 })))).toBe(billed);
    }));
  });
});
