import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { applyObjections, type DrawLine } from './index.ts';

const line = (given: Partial<DrawLine>): DrawLine => ({ id: 'a', description: 'Frame', scheduledCents: 1_000_000, workCents: 0, onHandCents: 0, approvedWorkCents: 0, approvedOnHandCents: 0, ...given });
const object = (given: DrawLine, cents: number) => applyObjections([given], [{ lineId: 'a', cents, reason: 'Not seen yet.' }])[0];

describe('an objection', () => {
  it('lowers this draw\'s work first, then its materials, and leaves what was approved', () => {
    const asked = line({ workCents: 700, approvedWorkCents: 400, onHandCents: 250, approvedOnHandCents: 50 });
    expect(object(asked, 300)).toMatchObject({ workCents: 400, onHandCents: 250 });
    expect(object(asked, 301)).toMatchObject({ workCents: 400, onHandCents: 249 });
    expect(object(asked, 500)).toMatchObject({ workCents: 400, onHandCents: 50 });
  });

  it('takes off exactly its sum, never from what was approved of the work, and touches no other line', () => {
    const any = fc.record({ approvedWorkCents: fc.nat(100_000), approvedOnHandCents: fc.nat(100_000), work: fc.integer({ min: 0, max: 100_000 }), onHandCents: fc.nat(200_000), share: fc.integer({ min: 1, max: 100 }) });
    fc.assert(
      fc.property(any, ({ work, share, ...given }) => {
        const asked = line({ ...given, workCents: given.approvedWorkCents + work });
        const most = work + given.onHandCents - given.approvedOnHandCents;
        fc.pre(most > 0);
        const cents = Math.max(1, Math.floor((most * share) / 100));
        const other = line({ id: 'b', workCents: 5 });
        const [lowered, untouched] = applyObjections([asked, other], [{ lineId: 'a', cents, reason: 'Not seen yet.' }]);
        expect((lowered?.workCents ?? 0) + (lowered?.onHandCents ?? 0)).toBe(asked.workCents + asked.onHandCents - cents);
        expect(lowered?.workCents).toBe(Math.max(asked.approvedWorkCents, asked.workCents - cents));
        expect(lowered?.onHandCents).toBeGreaterThanOrEqual(0);
        expect(untouched).toBe(other);
      }),
    );
  });
});
