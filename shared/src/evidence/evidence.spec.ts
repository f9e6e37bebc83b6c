import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { distanceM, hammingDistance, placeFinding, reuseFinding, timeFinding } from './index.ts';

const SITE = { latitude: 39.4017, longitude: -84.5613, radiusM: 75 };
/** So many meters north; a degree of latitude on this sphere is 111,195.08 m (π × 6,371,008.8 m / 180). */
const north = (m: number) => ({ latitude: SITE.latitude + m / 111_195.08, longitude: SITE.longitude });

describe('distance', () => {
  it('is a degree of the mean Earth along a meridian and along the equator', () => {
    expect(distanceM({ latitude: 0, longitude: 0 }, { latitude: 1, longitude: 0 })).toBeCloseTo(111_195.08, 1);
    expect(distanceM({ latitude: 0, longitude: 10 }, { latitude: 0, longitude: 11 })).toBeCloseTo(111_195.08, 1);
    expect(distanceM({ latitude: 90, longitude: 0 }, { latitude: -90, longitude: 120 })).toBeCloseTo(Math.PI * 6_371_008.8, 1);
  });

  it('is symmetric, never negative, and zero only at the same place', () => {
    const point = fc.record({ latitude: fc.double({ min: -90, max: 90, noNaN: true }), longitude: fc.double({ min: -180, max: 180, noNaN: true }) });
    fc.assert(fc.property(point, point, (a, b) => {
      const there = distanceM(a, b);
      expect(there).toBeGreaterThanOrEqual(0);
      expect(there).toBeLessThanOrEqual(Math.PI * 6_371_008.8 + 1e-3);
      expect(distanceM(b, a)).toBeCloseTo(there, 6);
      expect(distanceM(a, a)).toBe(0);
    }));
  });

  it('refuses points off the globe', () => {
    expect(() => distanceM({ latitude: 91, longitude: 0 }, SITE)).toThrow(/latitude/);
    expect(() => distanceM(SITE, { latitude: 0, longitude: Number.NaN })).toThrow(/longitude/);
  });
});

describe('place', () => {
  it.each([
    [{ ...north(0), accuracyM: 5 }, 'on_site'],
    [{ ...north(74.9), accuracyM: null }, 'on_site'],
    [{ ...north(75.5), accuracyM: null }, 'off_site'],
    [{ ...north(84), accuracyM: 10 }, 'on_site'],
    [{ ...north(86), accuracyM: 10 }, 'off_site'],
    [{ ...north(0), accuracyM: 101 }, 'unknown'],
    [{ ...north(174.9), accuracyM: 100 }, 'on_site'],
  ] as const)('of %j is %s', (photo, result) => {
    expect(placeFinding(photo, SITE).result).toBe(result);
  });

  it('is unknown without a place of the photo or of the site', () => {
    expect(placeFinding(null, SITE).result).toBe('unknown');
    expect(placeFinding({ ...SITE, accuracyM: 1 }, null).result).toBe('unknown');
  });

  it('names its figures', () => {
    expect(placeFinding({ ...north(4_200), accuracyM: 6.4 }, SITE).sentence).toBe('Taken 4.2 km from the site (the phone was sure within 6 m); within 75 m counts as on site.');
  });
});

describe('time', () => {
  it.each([
    [null, '2026-11-01', null, 'unknown'],
    ['2026-10-31', '2026-11-01', null, 'before'],
    ['2026-11-01', '2026-11-01', null, 'inside'],
    ['2026-11-20', '2026-11-01', '2026-11-20', 'inside'],
    ['2026-11-21', '2026-11-01', '2026-11-20', 'after'],
    ['2026-11-21', null, '2026-11-20', 'after'],
    ['2026-11-19', null, '2026-11-20', 'unknown'],
  ])('of a photo of %s with work from %s until %s is %s', (takenOn, beganOn, claimedOn, result) => {
    expect(timeFinding({ takenOn, beganOn, claimedOn }).result).toBe(result);
  });
});

describe('reuse', () => {
  it('counts the bits that differ', () => {
    expect(hammingDistance('0000000000000000', 'ffffffffffffffff')).toBe(64);
    expect(hammingDistance('00000000000000f0', '0000000000000010')).toBe(3);
    expect(() => hammingDistance('xyz', '0000000000000000')).toThrow();
  });

  it('is alike within a few bits, new beyond, unknown without shapes, and never names another job', () => {
    const sameJob = { milestone: 'Foundation', addedOn: '2026-10-03' };
    expect(reuseFinding({ bits: 6, sameJob })).toMatchObject({ result: 'alike', sentence: expect.stringContaining('for Foundation on October 3, 2026 (6 of 64') as unknown });
    expect(reuseFinding({ bits: 7, sameJob }).result).toBe('new');
    expect(reuseFinding(null).result).toBe('new');
    expect(reuseFinding(null, false).result).toBe('unknown');
    expect(reuseFinding({ bits: 0, sameJob: null }).sentence).toContain('added before elsewhere (0 of 64');
  });
});
