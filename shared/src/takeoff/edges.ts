import { given, must, quantity, step, type Step } from '../arithmetic/index.ts';
import { wholeNumber } from './item.ts';
import { ceilDivide, countOf, lengthOf, type Inches } from './length.ts';

const FOOT = 120_000n;

/** Rim: each run that closes the joists, in stock lengths laid end to end. Throws InvalidInput. */
export function rim(runs: readonly Inches[], stockFeet: number): { pieces: number; steps: Step } {
  must(runs.length > 0, 'rim.runs', runs, 'must name at least one run');
  const stock = BigInt(wholeNumber(stockFeet, 'rim.stockFeet', 4, 60)) * FOOT;
  const pieces = runs.reduce((sum, run, i) => sum + countOf(ceilDivide(lengthOf(run, `rim.runs.${i}`), stock)), 0);
  return { pieces, steps: step('Rim', 'each run ÷ stock length, rounded up', quantity(pieces, 'ea'), [...runs.map((run) => given('Run', quantity(run, 'in'))), given('Stock', quantity(stockFeet, 'ft'))]) };
}

export interface BlockingInput {
  /** Spaces between members that are blocked, over all rows. */
  spaces: number;
  spacing: Inches;
  memberThickness: Inches;
  stockFeet: number;
}

/** Blocking: one block per space, spacing less a member's thickness long, cut from stock. Throws InvalidInput. */
export function blocking({ spaces, spacing, memberThickness, stockFeet }: BlockingInput): { blocks: number; pieces: number; steps: Step } {
  const block = lengthOf(spacing, 'blocking.spacing') - lengthOf(memberThickness, 'blocking.memberThickness');
  must(block > 0n, 'blocking.spacing', spacing, 'must be more than a member is thick');
  const perPiece = countOf((BigInt(wholeNumber(stockFeet, 'blocking.stockFeet', 4, 60)) * FOOT) / block);
  must(perPiece >= 1, 'blocking.stockFeet', stockFeet, 'must hold at least one block');
  const blocks = wholeNumber(spaces, 'blocking.spaces', 0, 100_000);
  const pieces = Math.ceil(blocks / perPiece);
  return { blocks, pieces, steps: step('Blocking', 'blocks ÷ blocks from one piece, rounded up', quantity(pieces, 'ea'), [given('Blocks', quantity(blocks, 'ea')), given('From one piece', quantity(perPiece, 'ea'))]) };
}

/** Hangers by the ends that hang. Throws InvalidInput. */
export function hangers(members: number, endsPerMember: number): { count: number; steps: Step } {
  const count = wholeNumber(members, 'hangers.members', 0, 100_000) * wholeNumber(endsPerMember, 'hangers.endsPerMember', 0, 2);
  return { count, steps: step('Hangers', 'members × ends that hang', quantity(count, 'ea'), [given('Members', quantity(members, 'ea')), given('Ends', quantity(endsPerMember, 'ea'))]) };
}
