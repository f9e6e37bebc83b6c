import { given, quantity, step } from '../arithmetic/index.ts';
import { adhesive } from './adhesive.ts';
import { deckFasteners } from './fasteners.ts';
import { floorDepth } from './floor-depth.ts';
import type { FloorGeometry } from './floor-types.ts';
import { boughtIn, type TakeoffItem } from './item.ts';
import { ceilDivide, countOf, inchesText, lengthOf } from './length.ts';
import { sheathingRows } from './sheathing.ts';

/** Sheathing in rows, its fasteners in boxes, and adhesive. Throws InvalidInput. */
export function deckItems(geometry: FloorGeometry, joistsInBay: readonly number[]): TakeoffItem[] {
  const { run, sheathing, joists } = geometry;
  const depth = inchesText(floorDepth(geometry));
  const sheets = sheathingRows({ run, depth, faceWidth: sheathing.faceWidth, sheetLength: sheathing.sheetLength });
  const bought = boughtIn(sheets.sheets, sheathing.wasteRate, 1, 'sheet', sheets.steps, 'Sheets to buy');
  // the first and the last row have one long edge over a rim
  const rimEdges = 2 * countOf(ceilDivide(lengthOf(run, 'run'), lengthOf(sheathing.sheetLength, 'sheathing.sheetLength')));
  const nails = deckFasteners(sheets.sheets, rimEdges, { sheetLength: sheathing.sheetLength, sheetWidth: '48', supportSpacing: joists.spacing, edgeSpacing: sheathing.edgeSpacing, fieldSpacing: sheathing.fieldSpacing });
  const boxes = boughtIn(nails.count, sheathing.fastenerWasteRate, sheathing.fastenersPerBox, 'box', nails.steps, 'Boxes to buy');
  return [
    { key: 'sheathing', label: 'Floor sheathing, 4 × 8 ft', unit: 'sheet', net: String(sheets.sheets), netUnit: 'sheet', purchased: String(bought.purchased), wasteRate: sheathing.wasteRate, steps: bought.steps },
    { key: 'sheathing-fasteners', label: 'Fasteners of the sheathing', unit: 'box', net: String(nails.count), netUnit: 'ea', purchased: String(boxes.purchased), wasteRate: sheathing.fastenerWasteRate, steps: boxes.steps },
    ...glueItems(geometry, joistsInBay, sheets.rows),
  ];
}

/** A bead along the clear span of each joist, and in each groove between rows. */
function glueItems({ run, clearSpans, sheathing }: FloorGeometry, joistsInBay: readonly number[], rows: number): TakeoffItem[] {
  if (!sheathing.adhesive) return [];
  const { wasteRate } = sheathing.adhesive;
  const onJoists = clearSpans.reduce((sum, span, i) => sum + lengthOf(span, `clearSpans.${i}`) * BigInt(joistsInBay[i] ?? 0), 0n);
  const inGrooves = lengthOf(run, 'run') * BigInt(rows - 1);
  // rounded up in the last place: a bead is never too short
  const beadFt = inchesText(ceilDivide(onJoists + inGrooves, 12n));
  const glue = adhesive({ beadFt, ...sheathing.adhesive });
  const steps = step('Adhesive', 'a bead on each joist and in each groove', quantity(glue.cartridges, 'cartridge'), [
    glue.steps,
    given('Joists', quantity(joistsInBay.reduce((sum, joists) => sum + joists, 0), 'ea')),
    given('Grooves', quantity(rows - 1, 'ea')),
  ]);
  return [{ key: 'adhesive', label: 'Adhesive', unit: 'cartridge', net: beadFt, netUnit: 'ft', purchased: String(glue.cartridges), wasteRate, steps }];
}
