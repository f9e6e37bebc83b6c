import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { adhesive, boardFeet, concrete } from './index.ts';

// an independent reckoning in decimals of many places; π to 40 places, from memory
const Exact = Decimal.clone({ precision: 60 });
const PI = new Exact('3.1415926535897932384626433832795028841972');
const tenths = (least: number, most: number) => fc.integer({ min: least, max: most }).map((n) => (n / 10).toFixed(1));

it('concrete is the same by decimals: net to four places, what is ordered up to a quarter yard', () => {
  const pour = fc.record({ label: fc.constant('Pour'), length: tenths(1, 12_000), width: tenths(1, 6_000), thickness: tenths(1, 480), count: fc.integer({ min: 1, max: 40 }) });
  fc.assert(fc.property(fc.array(pour, { minLength: 1, maxLength: 5 }), fc.integer({ min: 0, max: 10_000 }), (pours, wasteRate) => {
    // 27 ft³ of 1,728 in³ each
    const yards = pours.reduce((sum, { length, width, thickness, count }) => sum.plus(new Exact(length).times(width).times(thickness).times(count)), new Exact(0)).div(27 * 1_728);
    const { net, ordered } = concrete(pours, wasteRate);
    expect(new Exact(net).equals(yards.toDecimalPlaces(4, Decimal.ROUND_HALF_UP))).toBe(true);
    expect(new Exact(ordered).equals(yards.times(10_000 + wasteRate).div(10_000).times(4).ceil().div(4))).toBe(true);
  }));
});

it('board feet are the same by decimals', () => {
  const piece = fc.record({ thickness: fc.integer({ min: 1, max: 6 }), width: fc.integer({ min: 2, max: 12 }), length: tenths(1, 300), count: fc.integer({ min: 0, max: 500 }) });
  fc.assert(fc.property(fc.array(piece, { minLength: 1, maxLength: 6 }), (pieces) => {
    // the twelfth is divided last, so that a half stays exactly one
    const twelve = pieces.reduce((sum, { thickness, width, length, count }) => sum.plus(new Exact(length).times(thickness * width * count)), new Exact(0));
    expect(new Exact(boardFeet(pieces).boardFeet).equals(twelve.div(12).toDecimalPlaces(3, Decimal.ROUND_HALF_UP))).toBe(true);
  }));
});

it('cartridges are the same by decimals', () => {
  fc.assert(fc.property(tenths(0, 50_000), fc.integer({ min: 1, max: 60 }), fc.constantFrom('0.125', '0.1875', '0.25', '0.375', '0.5'), fc.integer({ min: 0, max: 10_000 }), (beadFt, ounces, beadDiameter, wasteRate) => {
    // 231 in³ in a gallon of 128 fl oz
    const feet = new Exact(ounces).times(231).div(128).div(PI.times(beadDiameter).times(beadDiameter).div(4)).div(12);
    expect(adhesive({ beadFt, ounces, beadDiameter, wasteRate }).cartridges).toBe(new Exact(beadFt).times(10_000 + wasteRate).div(10_000).div(feet).ceil().toNumber());
  }));
});
