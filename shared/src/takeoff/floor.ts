import { given, must, quantity, step } from '../arithmetic/index.ts';
import { adhesive } from './adhesive.ts';
import { blocking, hangers, rim } from './edges.ts';
import { deckFasteners } from './fasteners.ts';
import { floorDepth } from './floor-depth.ts';
import type { FloorGeometry } from './floor-types.ts';
import { builtUpGirder } from './girder.ts';
import { boughtIn, countItem, wholeNumber, type TakeoffItem } from './item.ts';
import { ceilDivide, countOf, inchesText, lengthOf } from './length.ts';
import { boardFeet, dressedSizes, nominal } from './lumber.ts';
import { memberLength, membersOnCenter } from './members.ts';
import { sheathingRows } from './sheathing.ts';
import { sillAnchorage } from './sill.ts';

/**
 * Everything that a floor's frame takes: joists by stock length, rim, blocking, hangers, girder with posts and nails, sill and bolts,
 * sheathing, fasteners and adhesive, each with what is bought and its arithmetic. An aid for the price, never a design: plans, the
 * designer and local code decide. Throws InvalidInput.
 */
export function floorTakeoff(geometry: FloorGeometry): TakeoffItem[] {
  must(geometry.clearSpans.length >= 1 && geometry.clearSpans.length <= 2, 'clearSpans', geometry.clearSpans, 'must be one bay, or two with a girder between them');
  must((geometry.girder === null) === (geometry.clearSpans.length === 1), 'girder', geometry.girder, 'must be there between two bays, and only there');
  const frame = joistItems(geometry);
  return [...frame.items, ...girderItems(geometry), ...sillItems(geometry), ...deckItems(geometry, frame.members)];
}

function joistItems({ run, clearSpans, joists, girder }: FloorGeometry): { items: TakeoffItem[]; members: number } {
  const { size, spacing, bearing, lap, extras, stock } = joists;
  const bays = clearSpans.length;
  const { count, perBay, steps } = membersOnCenter({ run, spacing, bays, extras });
  const lengths = clearSpans.map((clearSpan) => memberLength({ clearSpan, bearings: inchesText(lengthOf(bearing, 'joists.bearing') * 2n), lap: girder ? lap : '0', stock }));
  // the named extras go with the longer bay
  const longest = Math.max(...lengths.map(({ stockFeet }) => stockFeet));
  const byStock = new Map<number, number>();
  for (const { stockFeet } of lengths) byStock.set(stockFeet, (byStock.get(stockFeet) ?? 0) + perBay);
  byStock.set(longest, (byStock.get(longest) ?? 0) + extras);
  const { thickness, width } = nominal(size);
  const joistsBought = [...byStock].sort(([a], [b]) => b - a).map(([feet, n]) => countItem(`joists-${size}-${feet}`, `Joists ${size}, ${feet} ft`, n, step(`Joists of ${feet} ft`, 'those of the bays that need this stock length', quantity(n, 'ea'), [steps, ...lengths.map((one) => one.steps)])));
  const rimPieces = rim([run, run], longest);
  const blocks = blocking({ spaces: (perBay - 1) * bays * wholeNumber(joists.blockingRows, 'joists.blockingRows', 0, 20), spacing, memberThickness: dressedSizes[size].thickness, stockFeet: longest });
  const hung = hangers(count, joists.hungEnds);
  const board = boardFeet([...[...byStock].map(([feet, n]) => ({ thickness, width, length: String(feet), count: n })), { thickness, width, length: String(longest), count: rimPieces.pieces + blocks.pieces }]);
  const items = [
    ...joistsBought,
    countItem(`rim-${size}-${longest}`, `Rim ${size}, ${longest} ft`, rimPieces.pieces, rimPieces.steps),
    ...(blocks.pieces > 0 ? [countItem(`blocking-${size}-${longest}`, `Blocking ${size}, ${longest} ft`, blocks.pieces, blocks.steps)] : []),
    ...(hung.count > 0 ? [countItem(`hangers-${size}`, `Hangers for ${size}`, hung.count, hung.steps)] : []),
    { ...countItem(`board-feet-${size}`, `Board feet of ${size}, for comparison`, 0, board.steps, 'bf'), net: board.boardFeet, purchased: board.boardFeet },
  ];
  return { items, members: count };
}

function girderItems({ run, girder }: FloorGeometry): TakeoffItem[] {
  if (!girder) return [];
  const { size, ...rest } = girder;
  const { posts, pieces, nails, steps } = builtUpGirder({ run, ...rest });
  return [
    ...pieces.map(({ stockFeet, count }) => countItem(`girder-${size}-${stockFeet}`, `Girder ${size}, ${stockFeet} ft`, count, steps.pieces)),
    ...(posts > 0 ? [countItem('posts', 'Posts under the girder', posts, steps.posts)] : []),
    ...(nails > 0 ? [countItem('girder-nails', 'Nails of the girder', nails, steps.nails)] : []),
  ];
}

function sillItems({ sill }: FloorGeometry): TakeoffItem[] {
  if (!sill) return [];
  const { bolts, steps } = sillAnchorage(sill);
  return [countItem('anchor-bolts', 'Anchor bolts', bolts, steps)];
}

function deckItems(geometry: FloorGeometry, members: number): TakeoffItem[] {
  const { run, sheathing, joists } = geometry;
  const depth = inchesText(floorDepth(geometry));
  const sheets = sheathingRows({ run, depth, faceWidth: sheathing.faceWidth, sheetLength: sheathing.sheetLength });
  const bought = boughtIn(sheets.sheets, sheathing.wasteRate, 1, 'sheet', sheets.steps, 'Sheets to buy');
  // the first and the last row have one long edge over a rim
  const rimEdges = 2 * countOf(ceilDivide(lengthOf(run, 'run'), lengthOf(sheathing.sheetLength, 'sheathing.sheetLength')));
  const nails = deckFasteners(sheets.sheets, rimEdges, { sheetLength: sheathing.sheetLength, sheetWidth: '48', supportSpacing: joists.spacing, edgeSpacing: sheathing.edgeSpacing, fieldSpacing: sheathing.fieldSpacing });
  const boxes = boughtIn(nails.count, sheathing.fastenerWasteRate, sheathing.fastenersPerBox, 'box', nails.steps, 'Boxes to buy');
  const items: TakeoffItem[] = [
    { key: 'sheathing', label: 'Floor sheathing, 4 × 8 ft', unit: 'sheet', net: String(sheets.sheets), purchased: String(bought.purchased), wasteRate: sheathing.wasteRate, steps: bought.steps },
    { key: 'sheathing-fasteners', label: 'Fasteners of the sheathing', unit: 'box', net: String(nails.count), purchased: String(boxes.purchased), wasteRate: sheathing.fastenerWasteRate, steps: boxes.steps },
  ];
  if (!sheathing.adhesive) return items;
  const beadFt = inchesText(beadLength(geometry, members, sheets.rows) / 12n);
  const glue = adhesive({ beadFt, ...sheathing.adhesive });
  items.push({ key: 'adhesive', label: 'Adhesive', unit: 'cartridge', net: beadFt, purchased: String(glue.cartridges), wasteRate: sheathing.adhesive.wasteRate, steps: step('Adhesive', 'a bead on each joist and in each groove', quantity(glue.cartridges, 'cartridge'), [glue.steps, given('Joists', quantity(members, 'ea'))]) });
  return items;
}

/** A bead along each joist and in each groove between rows, in ten-thousandths of an inch. */
function beadLength({ run, clearSpans }: FloorGeometry, members: number, rows: number): bigint {
  const perBay = BigInt(members) / BigInt(clearSpans.length);
  const onJoists = clearSpans.reduce((sum, span) => sum + lengthOf(span, 'clearSpans') * perBay, 0n);
  return onJoists + lengthOf(run, 'run') * BigInt(Math.max(0, rows - 1));
}
