import { tenThousandths } from '../money/index.ts';
import { checkFloor } from './floor-check.ts';
import { floorDepth } from './floor-depth.ts';
import { girderWidth, type FloorGeometry } from './floor-types.ts';
import { ceilDivide, countOf, lengthOf } from './length.ts';
import { dressedSizes } from './lumber.ts';

/** A rectangle of the plan, in inches from the outer corner; x along the run, y across it. For a drawing only. */
export interface PlanRectangle {
  x: number;
  y: number;
  width: number;
  height: number;
}

export interface FramingPlan {
  width: number;
  height: number;
  joists: PlanRectangle[];
  rims: PlanRectangle[];
  girder: PlanRectangle | null;
  posts: PlanRectangle[];
  /** Middle lines of walls and girder, where joists bear. */
  bearingLines: { y: number }[];
}

const POST = 5.5;
const inches = (size: bigint): number => Number(size) / 10_000;

/** The floor's frame to scale, from the same inputs as its take-off. Throws InvalidInput. */
export function framingPlan(geometry: FloorGeometry): FramingPlan {
  checkFloor(geometry);
  const { run, clearSpans, joists, girder } = geometry;
  const [width, height] = [inches(lengthOf(run, 'run')), inches(floorDepth(geometry))];
  const thickness = inches(tenThousandths(dressedSizes[joists.size].thickness));
  const bearing = inches(lengthOf(joists.bearing, 'joists.bearing'));
  const spacing = inches(lengthOf(joists.spacing, 'joists.spacing'));
  const perBay = countOf(ceilDivide(lengthOf(run, 'run'), lengthOf(joists.spacing, 'joists.spacing'))) + 1;
  const spans = clearSpans.map((span, i) => inches(lengthOf(span, `clearSpans.${i}`)));
  const girderAt = bearing + (spans[0] ?? 0);
  const beam = girder ? inches(girderWidth(girder.plies)) : 0;
  const across = Array.from({ length: perBay }, (_, i) => i * spacing);
  const bays = girder ? [{ y: 0, height: girderAt + beam }, { y: girderAt, height: height - girderAt }] : [{ y: 0, height }];
  const posts = girder ? countOf(ceilDivide(lengthOf(run, 'run'), lengthOf(girder.postSpacing, 'girder.postSpacing'))) - 1 : 0;
  return {
    width,
    height,
    // joists of two bays lie beside each other over the girder; the last one closes the run, whatever is left of the spacing
    joists: bays.flatMap((bay, i) => across.map((x) => ({ x: Math.min(x + i * thickness, width - thickness), y: bay.y, width: thickness, height: bay.height }))),
    rims: [{ x: 0, y: 0, width, height: thickness }, { x: 0, y: height - thickness, width, height: thickness }],
    girder: girder ? { x: 0, y: girderAt, width, height: beam } : null,
    posts: Array.from({ length: posts }, (_, i) => ({ x: (width * (i + 1)) / (posts + 1) - POST / 2, y: girderAt + beam / 2 - POST / 2, width: POST, height: POST })),
    bearingLines: [{ y: bearing / 2 }, ...(girder ? [{ y: girderAt + beam / 2 }] : []), { y: height - bearing / 2 }],
  };
}
