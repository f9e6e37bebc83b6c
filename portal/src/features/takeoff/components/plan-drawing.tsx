import { framingPlan, type FloorGeometry, type PlanRectangle } from '@tallypole/shared/takeoff';
import classes from './takeoff.module.css';
import { strings } from '../strings.ts';

const MARGIN = 12;

/** The framing to scale, from the same inputs as the quantities. */
export function PlanDrawing({ geometry }: { geometry: FloorGeometry }) {
  const plan = framingPlan(geometry);
  const box = (rectangle: PlanRectangle, i: number, name: string) => <rect key={`${name}${i}`} className={classes[name]} x={rectangle.x} y={rectangle.y} width={rectangle.width} height={rectangle.height} />;
  return (
    <svg className={classes['plan']} viewBox={`${-MARGIN} ${-MARGIN} ${plan.width + 2 * MARGIN} ${plan.height + 2 * MARGIN}`} role="img" aria-label={strings.planSays(plan.joists.length, plan.posts.length)}>
      {plan.joists.map((joist, i) => box(joist, i, 'joist'))}
      {plan.rims.map((rim, i) => box(rim, i, 'joist'))}
      {plan.girder ? box(plan.girder, 0, 'girder') : null}
      {plan.posts.map((post, i) => box(post, i, 'post'))}
    </svg>
  );
}
