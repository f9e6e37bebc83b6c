import { given, must, quantity, step, type Step } from '../arithmetic/index.ts';
import { wholeNumber } from './item.ts';
import { ceilDivide, countOf, lengthOf, type Inches } from './length.ts';
import { checkedStock, stockLength } from './lumber.ts';

export interface GirderInput {
  /** Out to out of the girder. */
  run: Inches;
  plies: number;
  /** Feet that it is bought in. */
  stock: readonly number[];
  /** Largest distance between supports. */
  postSpacing: Inches;
  /** How many plies may join over one post. */
  jointsTogether: number;
  /** Nails for each pair of plies: rows, and their spacing along the run. */
  nailRows: number;
  nailSpacing: Inches;
}

export interface Girder {
  /** Interior posts; the ends bear on the walls. */
  posts: number;
  /** Pieces by stock length in feet, longest first. */
  pieces: { stockFeet: number; count: number; steps: Step }[];
  nails: number;
  steps: { posts: Step; nails: Step };
}

/**
 * A built-up girder: interior posts = ceil(run ÷ post spacing) − 1, evenly spaced; each ply in pieces that end over posts, staggered so
 * that at most the named number of plies joins over one post; nails = pairs of plies × rows × (ceil(run ÷ spacing) + 1).
 * For the price alone: plans, the designer and local code decide the girder. Throws InvalidInput.
 */
export function builtUpGirder(input: GirderInput): Girder {
  const run = lengthOf(input.run, 'girder.run');
  checkedStock(input.stock, 'girder.stock');
  const plies = wholeNumber(input.plies, 'girder.plies', 1, 6);
  const together = wholeNumber(input.jointsTogether, 'girder.jointsTogether', 1, 6);
  const bays = countOf(ceilDivide(run, lengthOf(input.postSpacing, 'girder.postSpacing')));
  const counted = new Map<number, number>();
  for (let ply = 0; ply < plies; ply += 1) {
    for (const pieceBays of laidOut(bays, ply, baysPerPiece(run, bays, input.stock), plies, together)) {
      // rounded up: a piece that is a hair short would not reach its post
      const feet = stockLength(ceilDivide(run * BigInt(pieceBays), BigInt(bays)), input.stock, 'girder.stock');
      counted.set(feet, (counted.get(feet) ?? 0) + 1);
    }
  }
  const pieces = [...counted].sort(([a], [b]) => b - a).map(([stockFeet, count]) => ({
    stockFeet,
    count,
    steps: step(`Girder pieces of ${stockFeet} ft`, 'each ply in pieces that end over posts, joints staggered; those that need this stock length', quantity(count, 'ea'), [
      given('Plies', quantity(plies, 'ea')),
      given('Run', quantity(input.run, 'in')),
      given('Spaces between posts', quantity(bays, 'ea')),
      given('Plies that may join over one post', quantity(together, 'ea')),
    ]),
  }));
  const alongRun = countOf(ceilDivide(run, lengthOf(input.nailSpacing, 'girder.nailSpacing'))) + 1;
  const nails = (plies - 1) * wholeNumber(input.nailRows, 'girder.nailRows', 1, 6) * alongRun;
  return {
    posts: bays - 1,
    pieces,
    nails,
    steps: {
      posts: step('Interior posts', 'run ÷ post spacing rounded up, less one', quantity(bays - 1, 'ea'), [given('Run', quantity(input.run, 'in')), given('Post spacing', quantity(input.postSpacing, 'in'))]),
      nails: step('Nails', 'pairs of plies × rows × (run ÷ spacing rounded up, and one more)', quantity(nails, 'ea'), [given('Pairs of plies', quantity(plies - 1, 'ea')), given('Rows', quantity(input.nailRows, 'ea')), given('Along the run', quantity(alongRun, 'ea'))]),
    },
  };
}

/** How many spaces between posts the longest stock reaches over. */
function baysPerPiece(run: bigint, bays: number, stock: readonly number[]): number {
  const longest = BigInt(Math.max(...stock, 0)) * 120_000n;
  const reach = Math.min(bays, countOf((longest * BigInt(bays)) / run));
  must(reach >= 1, 'girder.stock', stock, 'must reach from one post to the next');
  return reach;
}

/** The pieces of one ply, in spaces between posts: the first one is shorter from ply to ply, so that joints don't meet. */
function laidOut(bays: number, ply: number, reach: number, plies: number, together: number): number[] {
  if (bays <= reach) return [bays];
  must(Math.ceil(plies / reach) <= together, 'girder.jointsTogether', together, 'must allow the joints that these stock lengths make; longer stock or more joints');
  const first = (ply % reach) + 1;
  const pieces = [first];
  for (let left = bays - first; left > 0; left -= reach) pieces.push(Math.min(left, reach));
  return pieces;
}
