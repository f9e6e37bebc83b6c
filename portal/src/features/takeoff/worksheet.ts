import { InvalidInput } from '@tallypole/shared/arithmetic';
import type { Grade, Species } from '@tallypole/shared/span';
import { commonStock, floorTakeoff, parseLength, type FloorGeometry, type LumberSize, type TakeoffItem } from '@tallypole/shared/takeoff';

export interface JoistEntry {
  size: LumberSize;
  spacing: string;
  extras: string;
  blockingRows: string;
}

/** The worksheet as it is typed. */
export interface Worksheet {
  run: string;
  spanA: string;
  spanB: string;
  girderSize: LumberSize;
  girderPlies: string;
  postSpacing: string;
  faceWidth: string;
  wastePercent: string;
  drawn: JoistEntry;
  proposed: JoistEntry;
  species: Species;
  grade: Grade;
  /** Unit costs by item, dollars as text. */
  costs: Record<string, string>;
}

export const emptyWorksheet: Worksheet = {
  run: "36'", spanA: "13' 4\"", spanB: "12' 6\"", girderSize: '2x12', girderPlies: '3', postSpacing: "8'", faceWidth: '47.5', wastePercent: '5',
  drawn: { size: '2x10', spacing: '16', extras: '0', blockingRows: '1' },
  proposed: { size: '2x10', spacing: '16', extras: '0', blockingRows: '1' },
  species: 'Spruce-pine-fir', grade: '#2', costs: {},
};

/** The geometry of one side. Throws InvalidInput with the worksheet's own field. */
function geometryOf(sheet: Worksheet, side: 'drawn' | 'proposed'): FloorGeometry {
  const joists = sheet[side];
  const second = sheet.spanB.trim() !== '';
  return {
    run: parseLength(sheet.run, 'run'),
    clearSpans: [parseLength(sheet.spanA, 'spanA'), ...(second ? [parseLength(sheet.spanB, 'spanB')] : [])],
    joists: { size: joists.size, spacing: joists.spacing, bearing: '1.5', lap: '3', extras: whole(joists.extras, `${side}.extras`), blockingRows: whole(joists.blockingRows, `${side}.blockingRows`), hungEnds: 0, stock: commonStock },
    girder: second ? { size: sheet.girderSize, plies: whole(sheet.girderPlies, 'girderPlies'), postSpacing: parseLength(sheet.postSpacing, 'postSpacing'), jointsTogether: 2, nailRows: 2, nailSpacing: '12', stock: commonStock } : null,
    sill: null,
    sheathing: {
      faceWidth: sheet.faceWidth, sheetLength: '96', wasteRate: whole(sheet.wastePercent, 'wastePercent') * 100, edgeSpacing: '6', fieldSpacing: '12', fastenersPerBox: 1_000, fastenerWasteRate: 1_000,
      adhesive: { ounces: 28, beadDiameter: '0.25', wasteRate: 1_000 },
    },
  };
}

function whole(text: string, field: string): number {
  if (!/^\d{1,4}$/.test(text.trim())) throw new InvalidInput(field, text, 'must be a whole number');
  return Number(text.trim());
}

export interface Counted {
  drawn: TakeoffItem[];
  proposed: TakeoffItem[];
  geometry: { drawn: FloorGeometry; proposed: FloorGeometry };
}

/** Both sides counted, or what is wrong and where. */
export function count(sheet: Worksheet): Counted | InvalidInput {
  try {
    const geometry = { drawn: geometryOf(sheet, 'drawn'), proposed: geometryOf(sheet, 'proposed') };
    return { drawn: floorTakeoff(geometry.drawn), proposed: floorTakeoff(geometry.proposed), geometry };
  } catch (error) {
    if (error instanceof InvalidInput) return error;
    throw error;
  }
}
