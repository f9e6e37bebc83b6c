import { quantity, step } from '../arithmetic/index.ts';
import { blocking, hangers, rim } from './edges.ts';
import { girderWidth, type FloorGeometry } from './floor-types.ts';
import { countItem, type TakeoffItem } from './item.ts';
import { ceilDivide, inchesText, lengthOf, lengthOrNone, type Inches } from './length.ts';
import { boardFeet, dressedSizes, nominal } from './lumber.ts';
import { memberLength, membersOnCenter } from './members.ts';

/** Joists by stock length, rim, blocking, hangers and their board feet; and how many joists lie in each bay. Throws InvalidInput. */
export function joistItems(geometry: FloorGeometry): { items: TakeoffItem[]; joistsInBay: number[] } {
  const { run, clearSpans, joists } = geometry;
  const { size, spacing, bearing, extras, stock, blockingRows, hungEnds } = joists;
  const { count, perBay, steps } = membersOnCenter({ run, spacing, bays: clearSpans.length, extras });
  const bearings = inchesText(lengthOf(bearing, 'joists.bearing') * 2n);
  const lengths = clearSpans.map((clearSpan, i) => memberLength({ clearSpan, bearings, lap: beyondBearing(geometry), stock }, `clearSpans.${i}`));
  // the named extras go with the longer bay
  const longer = lengths.reduce((at, one, i) => (lengthOf(one.length, 'length') > lengthOf(lengths[at]?.length ?? one.length, 'length') ? i : at), 0);
  const joistsInBay = lengths.map((_, i) => perBay + (i === longer ? extras : 0));
  const longest = Math.max(...lengths.map(({ stockFeet }) => stockFeet));
  const byStock = new Map<number, number>();
  lengths.forEach(({ stockFeet }, i) => byStock.set(stockFeet, (byStock.get(stockFeet) ?? 0) + (joistsInBay[i] ?? 0)));

  const { thickness, width } = nominal(size);
  const edge = rim([run, run], longest);
  const blocks = blocking({ spaces: (perBay - 1) * clearSpans.length * blockingRows, spacing, memberThickness: dressedSizes[size].thickness, stockFeet: longest });
  const hung = hangers(count, hungEnds);
  const board = boardFeet([...[...byStock].map(([feet, n]) => ({ thickness, width, length: String(feet), count: n })), { thickness, width, length: String(longest), count: edge.pieces + blocks.pieces }]);
  const items: TakeoffItem[] = [
    ...[...byStock].sort(([a], [b]) => b - a).map(([feet, n]) => countItem(`joists-${size}-${feet}`, `Joists ${size}, ${feet} ft`, n, step(`Joists of ${feet} ft`, 'those of the bays that need this stock length', quantity(n, 'ea'), [steps, ...lengths.map((one) => one.steps)]))),
    { ...countItem(`rim-${size}-${longest}`, `Rim ${size}, ${longest} ft`, edge.pieces, edge.steps), net: inchesText(lengthOf(run, 'run') * 2n / 12n), netUnit: 'ft' },
    ...(blocks.pieces > 0 ? [{ ...countItem(`blocking-${size}-${longest}`, `Blocking ${size}, ${longest} ft`, blocks.pieces, blocks.steps), net: String(blocks.blocks) }] : []),
    ...(hung.count > 0 ? [countItem(`hangers-${size}`, `Hangers for ${size}`, hung.count, hung.steps)] : []),
    { ...countItem(`board-feet-${size}`, `Board feet of ${size}, for comparison`, 0, board.steps, 'bf'), net: board.boardFeet, purchased: board.boardFeet },
  ];
  return { items, joistsInBay };
}

/**
 * How far a joist goes on beyond its bearing on the girder: the lap, or more where the girder is so wide that two joists would not lap
 * by as much; each goes half of width and lap past its own face of the girder then.
 */
function beyondBearing({ joists, girder }: FloorGeometry): Inches {
  if (!girder) return '0';
  const lap = lengthOrNone(joists.lap, 'joists.lap');
  const across = ceilDivide(girderWidth(girder.plies) + lap, 2n) - lengthOf(joists.bearing, 'joists.bearing');
  return inchesText(across > lap ? across : lap);
}
