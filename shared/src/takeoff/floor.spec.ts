import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { priceChange } from '../pricing/index.ts';
import { commonStock, concreteTakeoff, depthPrompts, differenceLines, floorTakeoff, framingPlan, takeoffDifference, type FloorGeometry } from './index.ts';

const floor: FloorGeometry = {
  run: '432',
  clearSpans: ['160', '150'],
  joists: { size: '2x10', spacing: '16', bearing: '1.5', lap: '3', extras: 4, blockingRows: 1, hungEnds: 0, stock: commonStock },
  girder: { size: '2x12', plies: 3, postSpacing: '96', jointsTogether: 2, nailRows: 2, nailSpacing: '12', stock: commonStock },
  sill: { size: '2x6', stock: commonStock, pieces: ['192', '192', '48'], maxSpacing: '72', endDistance: '12', boltDiameter: '0.5' },
  sheathing: { faceWidth: '47.5', sheetLength: '96', wasteRate: 500, edgeSpacing: '6', fieldSpacing: '12', fastenersPerBox: 1_000, fastenerWasteRate: 1_000, adhesive: { ounces: 28, beadDiameter: '0.25', wasteRate: 1_000 } },
};
const deeper: FloorGeometry = { ...floor, joists: { ...floor.joists, size: '2x12' } };
const bought = (geometry: FloorGeometry) => Object.fromEntries(floorTakeoff(geometry).map(({ key, purchased }) => [key, purchased]));

describe('the take-off of a floor', () => {
  it('counts everything of its frame', () => {
    // by hand: 28 joists in each bay; 160 + 3 + 3 = 166 in, 14 ft; 150 + 3 + 3 = 156 in, 14 ft; rim 2 × ceil(36 ÷ 14); 54 blocks, 11 from a piece;
    // depth 160 + 150 + 3 + 4.5 = 317.5 in, 7 rows of 9 half sheets; bolts 4 + 4 + 2
    expect(bought(floor)).toMatchObject({ 'joists-2x10-14': '60', 'rim-2x10-14': '6', 'blocking-2x10-14': '5', 'posts': '4', 'anchor-bolts': '10', 'sheathing': '34' });
  });
  it('takes stock from each bay for itself', () => expect(bought({ ...floor, clearSpans: ['160', '110'] })).toMatchObject({ 'joists-2x10-14': '32', 'joists-2x10-10': '28' }));
  it('knows one bay without a girder, and refuses a girder there', () => {
    expect(bought({ ...floor, clearSpans: ['160'], girder: null })).not.toHaveProperty('posts');
    expect(() => floorTakeoff({ ...floor, clearSpans: ['160'] })).toThrow(/girder/);
    expect(() => floorTakeoff({ ...floor, girder: null })).toThrow(/girder/);
    expect(() => floorTakeoff({ ...floor, clearSpans: ['400', '160'] })).toThrow(/clearSpan/);
  });
  it('buys the plates with their bolts, each piece in its stock length', () => expect(bought(floor)).toMatchObject({ 'sill-2x6-16': '2', 'sill-2x6-8': '1' }));
  it('makes joists lap over a wide girder: 162 in are 14 ft over three plies, and 16 ft over five', () => {
    // by hand: 162 + 3 + 3 = 168 in; over five plies of 1 1/2 in each joist goes (7 1/2 + 3) ÷ 2 past the girder's face: 162 + 1 1/2 + 5 1/4 = 168 3/4 in
    const wide = (plies: number) => ({ ...floor, clearSpans: ['162', '162'], joists: { ...floor.joists, extras: 0 }, girder: floor.girder && { ...floor.girder, plies, jointsTogether: 6 } });
    expect(bought(wide(3))).toHaveProperty(['joists-2x10-14'], '56');
    expect(bought(wide(5))).toHaveProperty(['joists-2x10-16'], '56');
  });
  it('glues each joist, the extras of the longer bay too', () => {
    // by hand: 28 × (160 + 150) in and 6 grooves of 432 in are 939 1/3 ft; an extra joist adds 160 in
    const bead = (extras: number) => floorTakeoff({ ...floor, joists: { ...floor.joists, extras } }).find(({ key }) => key === 'adhesive')?.net;
    expect([bead(0), bead(1), bead(3)]).toEqual(['939.3334', '952.6667', '979.3334']);
  });
  it('says what its net is in', () => {
    const of = (wanted: string) => floorTakeoff(floor).find(({ key }) => key === wanted);
    expect(of('rim-2x10-14')).toMatchObject({ net: '72', netUnit: 'ft', purchased: '6', unit: 'ea' });
    expect(of('blocking-2x10-14')).toMatchObject({ net: '54', netUnit: 'ea', purchased: '5', unit: 'ea' });
    expect(of('sheathing-fasteners')).toMatchObject({ netUnit: 'ea', unit: 'box' });
    expect(of('adhesive')).toMatchObject({ netUnit: 'ft', unit: 'cartridge' });
  });
  it('opens each quantity to the same figure', () => {
    for (const { key, purchased, steps } of floorTakeoff({ ...floor, joists: { ...floor.joists, hungEnds: 1 } })) expect([key, steps.result]).toMatchObject([key, { kind: 'quantity', value: purchased }]);
  });
  it('shows net, what is bought, and the waste it used', () => {
    for (const { purchased, steps, label, net } of floorTakeoff(floor)) {
      expect([label, Number(purchased) > 0, Number(net) > 0, steps.inputs.length > 0]).toEqual([label, true, true, true]);
    }
  });
});

describe('a difference between two worksheets', () => {
  it('takes the drawn size out whole and adds the proposed one; what stays is left out', () => {
    const difference = takeoffDifference(floorTakeoff(floor), floorTakeoff(deeper));
    expect(difference.map(({ key, effect, quantity }) => [key, effect, quantity])).toEqual([
      ['joists-2x12-14', 'add', '60'], ['rim-2x12-14', 'add', '6'], ['blocking-2x12-14', 'add', '5'],
      ['joists-2x10-14', 'deduct', '60'], ['rim-2x10-14', 'deduct', '6'], ['blocking-2x10-14', 'deduct', '5'],
    ]);
  });
  it('is nothing between a worksheet and itself, and turns around when the sides do', () => {
    fc.assert(fc.property(fc.integer({ min: 120, max: 700 }), fc.integer({ min: 120, max: 700 }), (a, b) => {
      const [one, other] = [floorTakeoff({ ...floor, run: String(a) }), floorTakeoff({ ...floor, run: String(b) })];
      expect(takeoffDifference(one, one)).toEqual([]);
      const sign = (list: ReturnType<typeof takeoffDifference>, flip: boolean) => list.map(({ key, effect, quantity }) => `${key} ${(effect === 'add') === flip ? '-' : '+'}${quantity}`).sort();
      expect(sign(takeoffDifference(one, other), false)).toEqual(sign(takeoffDifference(other, one), true));
    }), { numRuns: 40 });
  });
  it('becomes lines with prices of the list; a missing price is asked for, never nothing', () => {
    const difference = takeoffDifference(floorTakeoff(floor), floorTakeoff(deeper));
    const prices = new Map([['joists-2x12-14', { unitCost: '38.25', taxable: true }], ['joists-2x10-14', { unitCost: '26.5', taxable: true }]]);
    const { lines, missing } = differenceLines(difference, prices);
    expect(missing.map(({ key }) => key)).toEqual(['rim-2x12-14', 'blocking-2x12-14', 'rim-2x10-14', 'blocking-2x10-14']);
    const terms = { mode: 'margin', marginRate: 0, laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'keep', flatFeeCents: 0, insuranceRate: 0 } as const;
    // 60 × (38.25 − 26.50)
    expect(priceChange({ lines, terms, noCharge: false }).priceCents).toBe(70_500);
    expect(() => differenceLines(difference, new Map([['joists-2x12-14', { unitCost: '0', taxable: true }]]))).toThrow(/prices\.joists-2x12-14/);
  });
  it('asks what a deeper member moves, and nothing where the depth stays', () => {
    expect(depthPrompts(floor, deeper).map(({ topic }) => topic)).toEqual(['hangers', 'rim', 'blocking', 'bearing', 'stair_rise', 'wall_and_siding_height', 'beam_pockets', 'duct_and_pipe_holes']);
    expect(depthPrompts(floor, deeper)[0]?.question).toContain('2 in deeper');
    expect(depthPrompts(deeper, floor)[0]?.question).toContain('2 in shallower');
    expect(depthPrompts(floor, { ...floor, run: '500' })).toEqual([]);
  });
});

it('the drawing has as many members as the take-off counts, all within its outline', () => {
  fc.assert(fc.property(fc.integer({ min: 100, max: 900 }), fc.boolean(), (run, two) => {
    const geometry: FloorGeometry = { ...floor, run: String(run), joists: { ...floor.joists, extras: 0 }, ...(two ? {} : { clearSpans: ['160'], girder: null }) };
    const plan = framingPlan(geometry);
    expect(plan.joists.length).toBe(floorTakeoff(geometry).filter(({ key }) => key.startsWith('joists-')).reduce((sum, { purchased }) => sum + Number(purchased), 0));
    for (const { x, y, width, height } of [...plan.joists, ...plan.rims, ...(plan.girder ? [plan.girder] : [])]) {
      expect(x >= 0 && y >= 0 && x + width <= plan.width + 1e-9 && y + height <= plan.height + 1e-9).toBe(true);
    }
    expect(plan.posts.length).toBe(two ? Math.ceil(run / 96) - 1 : 0);
  }), { numRuns: 60 });
});

it('concrete is one item, ordered in quarter yards', () => {
  expect(concreteTakeoff([{ label: 'Footing', length: '360', width: '16', thickness: '8', count: 1 }], 500)).toMatchObject([{ key: 'concrete', unit: 'yd3', net: '0.9877', purchased: '1.25', wasteRate: 500 }]);
});

describe('a wrong floor is refused at its field', () => {
  const joists = (wrong: object) => ({ ...floor, joists: { ...floor.joists, ...wrong } }) as FloorGeometry;
  const girder = (wrong: object) => ({ ...floor, girder: { ...floor.girder, ...wrong } }) as FloorGeometry;
  const sill = (wrong: object) => ({ ...floor, sill: { ...floor.sill, ...wrong } }) as FloorGeometry;
  const sheathing = (wrong: object) => ({ ...floor, sheathing: { ...floor.sheathing, ...wrong } }) as FloorGeometry;
  it.each<[string, string, FloorGeometry]>([
    ['a run without length', 'run', { ...floor, run: '0' }],
    ['three bays', 'clearSpans', { ...floor, clearSpans: ['100', '100', '100'] }],
    ['a second span that is no length', 'clearSpans.1', { ...floor, clearSpans: ['160', 'x'] }],
    ['a second span longer than any stock', 'clearSpans.1', { ...floor, clearSpans: ['160', '400'] }],
    ['joists of an unknown size', 'joists.size', joists({ size: '3x3' })],
    ['joists closer than they are thick', 'joists.spacing', joists({ spacing: '1.5' })],
    ['no bearing', 'joists.bearing', joists({ bearing: '0' })],
    ['extras below nothing', 'joists.extras', joists({ extras: -1 })],
    ['half a row of blocking', 'joists.blockingRows', joists({ blockingRows: 0.5 })],
    ['three hung ends', 'joists.hungEnds', joists({ hungEnds: 3 })],
    ['joists without stock', 'joists.stock', joists({ stock: [] })],
    ['a girder of an unknown size', 'girder.size', girder({ size: '9x9' })],
    ['a girder of seven plies', 'girder.plies', girder({ plies: 7 })],
    ['girder stock of half a foot', 'girder.stock', girder({ stock: [8.5] })],
    ['girder stock that is no number', 'girder.stock', girder({ stock: [Number.NaN, 16] })],
    ['a sill of an unknown size', 'sill.size', sill({ size: '1x1' })],
    ['sill stock of nothing', 'sill.stock', sill({ stock: [0] })],
    ['a plate piece longer than any stock', 'sill.pieces.1', sill({ pieces: ['96', '300'] })],
    ['waste below nothing', 'sheathing.wasteRate', sheathing({ wasteRate: -1 })],
    ['waste of fasteners below nothing', 'sheathing.fastenerWasteRate', sheathing({ fastenerWasteRate: -1 })],
    ['boxes of no fastener', 'sheathing.fastenersPerBox', sheathing({ fastenersPerBox: 0 })],
    ['waste of adhesive of half a basis point', 'sheathing.adhesive.wasteRate', sheathing({ adhesive: { ounces: 28, beadDiameter: '0.25', wasteRate: 0.5 } })],
  ])('%s', (_, field, wrong) => expect(() => floorTakeoff(wrong)).toThrow(expect.objectContaining({ name: 'InvalidInput', field }) as InvalidInput));

  it('the drawing and the questions refuse it too', () => {
    expect(() => framingPlan(joists({ spacing: '0.001' }))).toThrow(expect.objectContaining({ field: 'joists.spacing' }) as InvalidInput);
    expect(() => depthPrompts(floor, joists({ size: '3x3' }))).toThrow(expect.objectContaining({ field: 'asProposed.joists.size' }) as InvalidInput);
  });
  it('a key that comes twice cannot be compared', () => {
    const items = floorTakeoff(floor);
    expect(() => takeoffDifference(items, [...items, ...items.slice(0, 1)])).toThrow(expect.objectContaining({ field: `asProposed.${items.length}.key` }) as InvalidInput);
  });
});
