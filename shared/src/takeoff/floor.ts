import { given, quantity, step } from '../arithmetic/index.ts';
import { checkFloor } from './floor-check.ts';
import { deckItems } from './floor-deck.ts';
import { joistItems } from './floor-joists.ts';
import type { FloorGeometry } from './floor-types.ts';
import { builtUpGirder } from './girder.ts';
import { countItem, type TakeoffItem } from './item.ts';
import { lengthOf } from './length.ts';
import { checkedStock, stockLength } from './lumber.ts';
import { sillAnchorage } from './sill.ts';

/**
 * Everything that a floor's frame takes: joists by stock length, rim, blocking, hangers, girder with posts and nails, sill and bolts,
 * sheathing, fasteners and adhesive, each with what is bought and its arithmetic. An aid for the price, never a design: plans, the
 * designer and local code decide. Throws InvalidInput.
 */
export function floorTakeoff(geometry: FloorGeometry): TakeoffItem[] {
  checkFloor(geometry);
  const frame = joistItems(geometry);
  return [...frame.items, ...girderItems(geometry), ...sillItems(geometry), ...deckItems(geometry, frame.joistsInBay)];
}

function girderItems({ run, girder }: FloorGeometry): TakeoffItem[] {
  if (!girder) return [];
  const { size, ...rest } = girder;
  const { posts, pieces, nails, steps } = builtUpGirder({ run, ...rest });
  return [
    ...pieces.map(({ stockFeet, count, steps: ownSteps }) => countItem(`girder-${size}-${stockFeet}`, `Girder ${size}, ${stockFeet} ft`, count, ownSteps)),
    ...(posts > 0 ? [countItem('posts', 'Posts under the girder', posts, steps.posts)] : []),
    ...(nails > 0 ? [countItem('girder-nails', 'Nails of the girder', nails, steps.nails)] : []),
  ];
}

/** Each plate piece in its stock length, and the bolts that hold it. */
function sillItems({ sill }: FloorGeometry): TakeoffItem[] {
  if (!sill) return [];
  const { bolts, steps } = sillAnchorage(sill);
  checkedStock(sill.stock, 'sill.stock');
  const byStock = new Map<number, string[]>();
  sill.pieces.forEach((piece, i) => {
    const feet = stockLength(lengthOf(piece, `sill.pieces.${i}`), sill.stock, `sill.pieces.${i}`);
    byStock.set(feet, [...(byStock.get(feet) ?? []), piece]);
  });
  const plates = [...byStock].sort(([a], [b]) => b - a).map(([feet, pieces]) =>
    countItem(`sill-${sill.size}-${feet}`, `Sill ${sill.size}, ${feet} ft`, pieces.length, step(`Sill of ${feet} ft`, 'each piece of the plate in the next stock length', quantity(pieces.length, 'ea'), pieces.map((piece) => given('Piece', quantity(piece, 'in'))))),
  );
  return [...plates, countItem('anchor-bolts', 'Anchor bolts', bolts, steps)];
}
