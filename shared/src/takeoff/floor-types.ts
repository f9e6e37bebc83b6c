import type { BasisPoints } from '../money/index.ts';
import type { Inches } from './length.ts';
import type { LumberSize } from './lumber.ts';

/** A floor between bearing lines: joists run across the depth, the girder along the run. Lengths in inches. */
export interface FloorGeometry {
  /** Out to out along the girder, across the joists. */
  run: Inches;
  /** Clear spans of the bays, from wall to girder to wall; one bay has no girder. */
  clearSpans: readonly Inches[];
  joists: {
    size: LumberSize;
    spacing: Inches;
    /** Bearing at each end. */
    bearing: Inches;
    /** How far joists of two bays lap over the girder. */
    lap: Inches;
    /** Doubled joists and trimmers named on the plan, over all bays. */
    extras: number;
    blockingRows: number;
    /** Ends that hang in hangers, of each joist. */
    hungEnds: 0 | 1 | 2;
    stock: readonly number[];
  };
  /** Between the bays; null where there is one bay. */
  girder: null | { size: LumberSize; plies: number; postSpacing: Inches; jointsTogether: number; nailRows: number; nailSpacing: Inches; stock: readonly number[] };
  /** The plate in its pieces, and what bolts it; null where it isn't part of the worksheet. */
  sill: null | { size: LumberSize; stock: readonly number[]; pieces: readonly Inches[]; maxSpacing: Inches; endDistance: Inches; boltDiameter: Inches };
  sheathing: {
    faceWidth: Inches;
    sheetLength: Inches;
    wasteRate: BasisPoints;
    edgeSpacing: Inches;
    fieldSpacing: Inches;
    fastenersPerBox: number;
    fastenerWasteRate: BasisPoints;
    /** Null where the sheathing isn't glued. */
    adhesive: null | { ounces: number; beadDiameter: Inches; wasteRate: BasisPoints };
  };
}

/** Width of a girder of so many plies of 1 1/2 in. */
export const girderWidth = (plies: number): bigint => BigInt(plies) * 15_000n;
