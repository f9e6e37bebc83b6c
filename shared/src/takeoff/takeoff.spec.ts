import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { adhesive, blocking, boardFeet, builtUpGirder, commonStock, concrete, deckFasteners, feetPerCartridge, formatLength, hangers, memberLength, membersOnCenter, parseLength, perRimEdge, perSheet, rim, sheathingByArea, sheathingRows, sillAnchorage, type GirderInput } from './index.ts';

const ft = (feet: number) => String(feet * 12);

describe('lengths as people write them', () => {
  it.each([["12' 6\"", '150'], ['12-6', '150'], ['12 ft 6 1/2 in', '150.5'], ['36\'', '432'], ['150.5', '150.5'], ['3/4"', '0.75'], ['14’ 7 3/16”', '175.1875'], ['19.2', '19.2'], ['10 ft', '120'], ['1 1/2', '1.5'], ['5-1/2"', '5.5'], ['1-1/2', '1.5'], ['12-6-1/2', '150.5'], ['12-6 1/2', '150.5'], ['12-0', '144'], ['6\' 1/2"', '72.5']])('%s is %s in', (text, inches) => {
    expect(parseLength(text)).toBe(inches);
  });
  it.each(['', 'about 12', '12 m', '1/3', '5/4', '-3', '0', '1001 ft', "12' 6' ", "12' 12\"", '1-50'])('%s is refused', (text) => expect(() => parseLength(text)).toThrow(InvalidInput));
  it('writes them back so that they are read the same', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 191_000 }), (sixteenths) => {
      const inches = parseLength(`${Math.floor(sixteenths / 16)}${sixteenths % 16 === 0 ? '' : `.${String((sixteenths % 16) * 625).padStart(4, '0')}`}`);
      expect(parseLength(formatLength(inches))).toBe(inches);
    }));
  });
});

describe('members', () => {
  // common practice, no source: 36 ft at 16 in
  it('are spaces and one more: 36 ft at 16 in is 28', () => expect(membersOnCenter({ run: ft(36), spacing: '16', bays: 1, extras: 0 }).count).toBe(28));
  it('lapped over a girder count in each bay, and extras are added', () => expect(membersOnCenter({ run: ft(36), spacing: '16', bays: 2, extras: 3 }).count).toBe(59));
  it('always reach the end: the spaces cover the run, and one space less does not', () => {
    fc.assert(fc.property(fc.integer({ min: 12, max: 1_200 }), fc.constantFrom(12, 16, 24), (run, spacing) => {
      const { count } = membersOnCenter({ run: String(run), spacing: String(spacing), bays: 1, extras: 0 });
      expect((count - 1) * spacing).toBeGreaterThanOrEqual(run);
      expect((count - 2) * spacing).toBeLessThan(run);
    }));
  });
  it('are bought in the next stock length', () => {
    expect(memberLength({ clearSpan: '164', bearings: '3', lap: '3', stock: commonStock })).toMatchObject({ length: '170', stockFeet: 16 });
    // a hair longer than 14 ft needs 16
    expect(memberLength({ clearSpan: '168', bearings: '0', lap: '0', stock: commonStock }).stockFeet).toBe(14);
    expect(memberLength({ clearSpan: '168.0625', bearings: '0', lap: '0', stock: commonStock }).stockFeet).toBe(16);
  });
  it('give board feet that are rounded once, half up', () => {
    // 2 × 10 × 16 ÷ 12 = 26.666…, three of them 80
    expect(boardFeet([{ thickness: 2, width: 10, length: '16', count: 1 }]).boardFeet).toBe('26.667');
    expect(boardFeet(Array.from({ length: 3 }, () => ({ thickness: 2, width: 10, length: '16', count: 1 }))).boardFeet).toBe('80.00');
  });
  it('give board feet that do not depend on the order of pieces', () => {
    fc.assert(fc.property(fc.array(fc.record({ thickness: fc.constantFrom(1, 2, 4), width: fc.integer({ min: 2, max: 12 }), length: fc.integer({ min: 1, max: 240 }).map((n) => (n / 10).toFixed(1)), count: fc.integer({ min: 0, max: 90 }) }), { minLength: 1, maxLength: 8 }), (pieces) => {
      expect(boardFeet([...pieces].reverse()).boardFeet).toBe(boardFeet(pieces).boardFeet);
    }));
  });
});

const girder: GirderInput = { run: ft(32), plies: 3, stock: [8, 12, 16], postSpacing: ft(8), jointsTogether: 2, nailRows: 2, nailSpacing: '12' };

describe('a built-up girder', () => {
  it('has its interior posts, pieces that end over posts, and nails', () => {
    // 32 ft in four spaces of 8 ft, three posts; reach of 16 ft is two spaces: plies of 8+16+8, 16+16, 8+16+8
    expect(builtUpGirder(girder)).toMatchObject({ posts: 3, pieces: [{ stockFeet: 16, count: 4 }, { stockFeet: 8, count: 4 }], nails: 2 * 2 * 33 });
  });
  it('needs no joint where the stock reaches over the run', () => expect(builtUpGirder({ ...girder, run: ft(16) })).toMatchObject({ posts: 1, pieces: [{ stockFeet: 16, count: 3 }] }));
  it('refuses stock that would join more plies over a post than is allowed', () => {
    expect(() => builtUpGirder({ ...girder, stock: [8] })).toThrow(/girder\.jointsTogether/);
    expect(() => builtUpGirder({ ...girder, stock: [6] })).toThrow(/girder\.stock/);
  });
  it('covers the run with every ply', () => {
    fc.assert(fc.property(fc.integer({ min: 8, max: 80 }), fc.integer({ min: 1, max: 4 }), fc.integer({ min: 5, max: 10 }), (run, plies, posts) => {
      const { pieces } = builtUpGirder({ ...girder, run: ft(run), plies, postSpacing: ft(posts), stock: [10, 16, 20], jointsTogether: 4 });
      expect(pieces.reduce((sum, { stockFeet, count }) => sum + stockFeet * count, 0)).toBeGreaterThanOrEqual(run * plies);
    }));
  });
});

describe('edges, sheets, fasteners, adhesive, bolts and concrete', () => {
  it('rim closes each run by itself', () => expect(rim([ft(36), ft(36)], 16).pieces).toBe(6));
  // 14 1/2 in from a piece of 16 ft: 13 blocks
  it('blocks are cut between members', () => expect(blocking({ spaces: 27, spacing: '16', memberThickness: '1.5', stockFeet: 16 })).toMatchObject({ blocks: 27, pieces: 3 }));
  it('hangers by ends', () => expect(hangers(28, 2).count).toBe(56));
  // common practice, no source: tongue and groove of 4 × 8 ft covers 47 1/2 in across
  it('sheets of a deck of 24 × 32 ft: 28 in tongue and groove, 24 square edged', () => {
    expect(sheathingRows({ run: ft(32), depth: ft(24), faceWidth: '47.5', sheetLength: '96' })).toMatchObject({ rows: 7, sheets: 28 });
    expect(sheathingRows({ run: ft(32), depth: ft(24), faceWidth: '48', sheetLength: '96' }).sheets).toBe(24);
  });
  it('two rows share a sheet where the run ends in a half', () => expect(sheathingRows({ run: ft(36), depth: ft(16), faceWidth: '48', sheetLength: '96' }).sheets).toBe(18));
  it('never fewer sheets in rows than the plain area asks for', () => {
    fc.assert(fc.property(fc.integer({ min: 4, max: 80 }), fc.integer({ min: 4, max: 60 }), (run, depth) => {
      const byRows = sheathingRows({ run: ft(run), depth: ft(depth), faceWidth: '48', sheetLength: '96' }).sheets;
      expect(byRows).toBeGreaterThanOrEqual(sheathingByArea({ areaFt2: String(run * depth), openingsFt2: '0', wasteRate: 0 }).sheets);
    }));
  });
  const fastening = { sheetLength: '96', sheetWidth: '48', supportSpacing: '16', edgeSpacing: '6', fieldSpacing: '12' };
  // common practice, no source: 6 in at panel ends, 12 in between
  it('fasteners of a sheet: 2 × 9 + 5 × 5 = 43; an edge over a rim adds 15', () => {
    expect([perSheet(fastening), perRimEdge(fastening)]).toEqual([43, 15]);
    expect(deckFasteners(28, 8, fastening).count).toBe(28 * 43 + 8 * 15);
  });
  it('feet of a cartridge: 28 oz at 1/4 in is 85.8 ft; a bead with waste is rounded up', () => {
    expect(feetPerCartridge(28, '0.25')).toBe('85.8');
    expect(adhesive({ beadFt: '856', ounces: 28, beadDiameter: '0.25', wasteRate: 0 }).cartridges).toBe(10);
    expect(adhesive({ beadFt: '859', ounces: 28, beadDiameter: '0.25', wasteRate: 0 }).cartridges).toBe(11);
    expect(adhesive({ beadFt: '856', ounces: 28, beadDiameter: '0.25', wasteRate: 1_000 }).cartridges).toBe(11);
  });
  const bolts = (pieces: number[]) => sillAnchorage({ pieces: pieces.map(ft), maxSpacing: '72', endDistance: '12', boltDiameter: '0.5' }).bolts;
  it('bolts by plate piece: 40 ft is 8 as one, 10 as 16 + 16 + 8', () => expect([bolts([40]), bolts([16, 16, 8])]).toEqual([8, 10]));
  it('bolts: cutting a plate never saves one', () => {
    fc.assert(fc.property(fc.integer({ min: 3, max: 20 }), fc.integer({ min: 3, max: 20 }), (a, b) => {
      expect(bolts([a, b])).toBeGreaterThanOrEqual(bolts([a + b]));
    }));
  });
  it('concrete in quarter yards, with waste', () => {
    const slab = { label: 'Slab', length: ft(24), width: ft(24), thickness: '4', count: 1 };
    expect(concrete([slab], 0)).toMatchObject({ net: '7.1111', ordered: '7.25' });
    expect(concrete([slab], 1_000)).toMatchObject({ net: '7.1111', ordered: '8.00' });
  });
});

describe('wrong entries are refused, each at its field', () => {
  const anchorage = { pieces: ['192'], maxSpacing: '72', endDistance: '12', boltDiameter: '0.5' };
  it.each<[string, string, () => unknown]>([
    ['a run of nothing', 'run', () => membersOnCenter({ run: '0', spacing: '16', bays: 1, extras: 0 })],
    ['a spacing below nothing', 'spacing', () => membersOnCenter({ run: '400', spacing: '-16', bays: 1, extras: 0 })],
    ['half a bay', 'bays', () => membersOnCenter({ run: '400', spacing: '16', bays: 0.5, extras: 0 })],
    ['extras below nothing', 'extras', () => membersOnCenter({ run: '400', spacing: '16', bays: 1, extras: -1 })],
    ['a member longer than any stock', 'clearSpan', () => memberLength({ clearSpan: '400', bearings: '3', lap: '0', stock: commonStock })],
    ['stock of half a foot', 'stock', () => memberLength({ clearSpan: '100', bearings: '3', lap: '0', stock: [8.5] })],
    ['five places', 'clearSpan', () => memberLength({ clearSpan: '100.00001', bearings: '3', lap: '0', stock: commonStock })],
    ['no plate piece', 'sill.pieces', () => sillAnchorage({ ...anchorage, pieces: [] })],
    ['bolts too far apart', 'sill.maxSpacing', () => sillAnchorage({ ...anchorage, maxSpacing: '73' })],
    ['an end bolt too far in', 'sill.endDistance', () => sillAnchorage({ ...anchorage, endDistance: '13' })],
    ['an end bolt too near the end', 'sill.endDistance', () => sillAnchorage({ ...anchorage, endDistance: '3' })],
    ['openings larger than the deck', 'openingsFt2', () => sheathingByArea({ areaFt2: '100', openingsFt2: '100', wasteRate: 0 })],
    ['waste of more than all', 'wasteRate', () => sheathingByArea({ areaFt2: '100', openingsFt2: '0', wasteRate: 10_001 })],
    ['no pour', 'pours', () => concrete([], 0)],
    ['a pour without thickness', 'pours.0.thickness', () => concrete([{ label: 'Slab', length: '100', width: '100', thickness: '0', count: 1 }], 0)],
    ['blocks without room', 'blocking.spacing', () => blocking({ spaces: 3, spacing: '1', memberThickness: '1.5', stockFeet: 16 })],
    ['no rim', 'rim.runs', () => rim([], 16)],
    ['three ends', 'hangers.endsPerMember', () => hangers(3, 3)],
    ['a bead of no width', 'adhesive.beadDiameter', () => feetPerCartridge(28, '0')],
  ])('%s', (_, field, work) => expect(work).toThrow(expect.objectContaining({ name: 'InvalidInput', field }) as InvalidInput));
});
