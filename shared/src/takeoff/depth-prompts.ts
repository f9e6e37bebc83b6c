import type { FloorGeometry } from './floor-types.ts';
import { inchesText } from './length.ts';
import { checkedSize, dressedSizes } from './lumber.ts';
import { tenThousandths } from '../money/index.ts';

export const depthTopics = ['hangers', 'rim', 'blocking', 'bearing', 'stair_rise', 'wall_and_siding_height', 'beam_pockets', 'duct_and_pipe_holes'] as const;
export type DepthTopic = (typeof depthTopics)[number];

export interface DepthPrompt {
  topic: DepthTopic;
  question: string;
}

/**
 * What a joist of another depth moves beside itself, as questions; their answers are kept with the change. Nothing where the depth stays.
 * Throws InvalidInput for an unknown size. Common practice, no source.
 */
export function depthPrompts(asDrawn: FloorGeometry, asProposed: FloorGeometry): DepthPrompt[] {
  const depth = ({ joists }: FloorGeometry, side: string) => tenThousandths(dressedSizes[checkedSize(joists.size, `${side}.joists.size`)].width);
  const moved = depth(asProposed, 'asProposed') - depth(asDrawn, 'asDrawn');
  if (moved === 0n) return [];
  const by = `${inchesText(moved < 0n ? -moved : moved)} in ${moved > 0n ? 'deeper' : 'shallower'}`;
  const questions: Record<DepthTopic, string> = {
    hangers: `Joists are ${by}: are the hangers ordered for the new depth?`,
    rim: `Is the rim of the same depth as the joists, all around?`,
    blocking: `Is the blocking cut from the new size, and are the rows still where the plan wants them?`,
    bearing: `Do joists and girder still bear as long as the plan asks, at walls, girder and pockets?`,
    stair_rise: `The floor is ${by}: does the stair still have even risers within the code's limit?`,
    wall_and_siding_height: `Do wall heights, siding, windows' heads and steps outside still meet?`,
    beam_pockets: `Are pockets and ledges in the foundation at the right height for a joist that is ${by}?`,
    duct_and_pipe_holes: `Do ducts and pipes still pass, with holes within what is allowed for the new joist?`,
  };
  return depthTopics.map((topic) => ({ topic, question: questions[topic] }));
}
