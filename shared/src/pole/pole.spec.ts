import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { polePicture, poleRows, poleSvg, withoutPrices, printColors, type PoleInput } from './index.ts';

const cents = fc.integer({ min: 0, max: 90_000_000 });
const milestone = fc.record({ id: fc.uuid(), name: fc.string({ maxLength: 30 }), state: fc.constantFrom('upcoming' as const, 'under_way' as const, 'claimed' as const, 'proven' as const), scheduledCents: cents, provenCents: cents, billedCents: cents, paidCents: cents, changes: fc.array(fc.record({ id: fc.uuid(), label: fc.string(), pending: fc.boolean() }), { maxLength: 4 }) });
const input: fc.Arbitrary<PoleInput> = fc.record({ milestones: fc.array(milestone, { maxLength: 60 }), general: fc.record({ scheduledCents: cents, provenCents: cents, billedCents: cents, paidCents: cents }), expectedTodayCents: fc.option(cents), prices: fc.constant(true) });

describe('the pole', () => {
  it('never lies: bands stand on each other, fill the rod and are as high as their share; fills stay inside', () => {
    fc.assert(
      fc.property(input, (given) => {
        const { bands, height } = polePicture(given, 600);
        const total = poleRows(given).reduce((a, row) => a + row.scheduledCents, 0);
        let floor = height;
        bands.forEach((band, i) => {
          expect(band.top + band.height).toBeCloseTo(floor, 6);
          floor = band.top;
          if (total > 0) expect(band.height).toBeCloseTo((600 * (poleRows(given)[i]?.scheduledCents ?? 0)) / total, 6);
          for (const fill of [band.provenHeight, band.billedHeight, band.paidHeight]) {
            expect(fill).toBeGreaterThanOrEqual(0);
            expect(fill).toBeLessThanOrEqual(band.height + 1e-9);
          }
        });
        if (bands.length > 0) expect(floor).toBeCloseTo(0, 6);
      }),
    );
  });

  it('reads with no milestone and with sixty', () => {
    const general = { scheduledCents: 0, provenCents: 0, billedCents: 0, paidCents: 0 };
    expect(polePicture({ milestones: [], general, expectedTodayCents: null, prices: true }, 600)).toMatchObject({ bands: [], pointerTop: null });
    const many = Array.from({ length: 60 }, (_, i) => ({ id: String(i), name: `M${i}`, state: 'upcoming' as const, scheduledCents: 100, provenCents: 0, billedCents: 0, paidCents: 0, changes: [] }));
    expect(polePicture({ milestones: many, general, expectedTodayCents: 3_000, prices: true }, 600)).toMatchObject({ pointerTop: 300 });
    expect(polePicture({ milestones: many, general, expectedTodayCents: 0, prices: true }, 600).bands.filter((band) => band.showsLabel)).toEqual([]);
  });

  it('says in words what a band is', () => {
    const of = (given: object) => polePicture({ milestones: [{ id: 'a', name: 'Frame', state: 'upcoming', scheduledCents: 10_000, provenCents: 0, billedCents: 0, paidCents: 0, changes: [], ...given }], general: { scheduledCents: 0, provenCents: 0, billedCents: 0, paidCents: 0 }, expectedTodayCents: null, prices: true }, 100).bands[0]?.caption;
    expect(of({})).toBe('$100');
    expect(of({ state: 'claimed' })).toBe('claimed, waits for proof');
    expect(of({ provenCents: 3_599 })).toBe('35 % in place');
    expect(of({ provenCents: 10_000, billedCents: 10_000 })).toBe('proven, billed');
    expect(of({ provenCents: 10_000, billedCents: 10_000, paidCents: 10_000 })).toBe('proven, paid');
  });

  it('keeps prices from whoever may not see them', () => {
    fc.assert(
      fc.property(input, (given) => {
        const blind = withoutPrices(given);
        expect(blind.milestones.every((m) => m.scheduledCents <= 10_000 && m.billedCents === 0 && m.paidCents === 0)).toBe(true);
        expect(polePicture(blind, 600).bands.some((band) => band.caption.includes('$'))).toBe(false);
      }),
    );
  });

  it('draws names as text, whatever they hold', () => {
    const svg = poleSvg(polePicture({ milestones: [{ id: 'a', name: '"><script>', state: 'upcoming', scheduledCents: 1, provenCents: 0, billedCents: 0, paidCents: 0, changes: [] }], general: { scheduledCents: 0, provenCents: 0, billedCents: 0, paidCents: 0 }, expectedTodayCents: null, prices: true }, 100), { rodWidth: 46, labels: true, colors: printColors, font: 'Inter' });
    expect(svg).not.toContain('<script>');
    expect(svg).toContain('&#60;script&#62;');
  });
});
