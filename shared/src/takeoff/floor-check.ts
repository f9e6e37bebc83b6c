import { must } from '../arithmetic/index.ts';
import { basisPoints } from '../money/index.ts';
import type { FloorGeometry } from './floor-types.ts';
import { wholeNumber } from './item.ts';
import { lengthOf, lengthOrNone } from './length.ts';
import { checkedSize, checkedStock, dressedSizes } from './lumber.ts';

/** Checks a floor as it is entered, so that an error names the field where it was entered. Throws InvalidInput. */
export function checkFloor({ run, clearSpans, joists, girder, sill, sheathing }: FloorGeometry): void {
  must(clearSpans.length >= 1 && clearSpans.length <= 2, 'clearSpans', clearSpans, 'must be one bay, or two with a girder between them');
  must((girder === null) === (clearSpans.length === 1), 'girder', girder, 'must be there between two bays, and only there');
  lengthOf(run, 'run');
  clearSpans.forEach((span, i) => lengthOf(span, `clearSpans.${i}`));
  checkJoists(joists);
  if (girder) {
    checkedSize(girder.size, 'girder.size');
    wholeNumber(girder.plies, 'girder.plies', 1, 6);
  }
  if (sill) checkedSize(sill.size, 'sill.size');
  basisPoints(sheathing.wasteRate, 'sheathing.wasteRate');
  basisPoints(sheathing.fastenerWasteRate, 'sheathing.fastenerWasteRate');
  wholeNumber(sheathing.fastenersPerBox, 'sheathing.fastenersPerBox', 1, 100_000);
  if (sheathing.adhesive) basisPoints(sheathing.adhesive.wasteRate, 'sheathing.adhesive.wasteRate');
}

function checkJoists(joists: FloorGeometry['joists']): void {
  const { thickness } = dressedSizes[checkedSize(joists.size, 'joists.size')];
  must(lengthOf(joists.spacing, 'joists.spacing') > lengthOf(thickness, 'joists.size'), 'joists.spacing', joists.spacing, 'must be more than a joist is thick');
  lengthOf(joists.bearing, 'joists.bearing');
  lengthOrNone(joists.lap, 'joists.lap');
  wholeNumber(joists.extras, 'joists.extras', 0, 1_000);
  wholeNumber(joists.blockingRows, 'joists.blockingRows', 0, 20);
  wholeNumber(joists.hungEnds, 'joists.hungEnds', 0, 2);
  checkedStock(joists.stock, 'joists.stock');
}
