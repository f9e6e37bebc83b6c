import { girderWidth, type FloorGeometry } from './floor-types.ts';
import { lengthOf } from './length.ts';

/** Out to out across the bays: clear spans, bearings on the two walls, and the girder; in ten-thousandths of an inch. Throws InvalidInput. */
export function floorDepth({ clearSpans, joists, girder }: FloorGeometry): bigint {
  const spans = clearSpans.reduce((sum, span, i) => sum + lengthOf(span, `clearSpans.${i}`), 0n);
  return spans + 2n * lengthOf(joists.bearing, 'joists.bearing') + (girder ? girderWidth(girder.plies) : 0n);
}
