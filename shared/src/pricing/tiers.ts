import { must, rate, given, money, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, cents, minus, percentOf, sum, type Cents } from '../money/index.ts';
import type { Tier } from './types.ts';

/**
 * A charge by marginal tiers: each tier's rate on the part of the base within it, each part rounded once. A negative base is the
 * mirror image. Tiers must rise and end with one without a bound. Throws InvalidInput.
 */
export function byTiers(base: Cents, tiers: readonly Tier[], field = 'tiers'): Cents {
  return sum(tierParts(base, tiers, field).map(({ charge }) => charge), field);
}

/** The same, as steps for each tier that was reached. */
export function tierSteps(base: Cents, tiers: readonly Tier[], field = 'tiers'): Step[] {
  return tierParts(base, tiers, field)
    .filter(({ part }) => part !== 0)
    .map(({ part, charge, tier }, i) => step(`Tier ${i + 1}`, 'rate × the part of the base in this tier', money(charge), [given('part', money(part)), given('rate', rate(tier.rate))]));
}

function tierParts(base: Cents, tiers: readonly Tier[], field: string) {
  must(tiers.length > 0, field, tiers, 'must hold at least one tier');
  const negative = base < 0;
  const size = Math.abs(cents(base, field));
  let below = 0;
  return tiers.map((tier, i) => {
    basisPoints(tier.rate, `${field}.${i}.rate`);
    const last = i === tiers.length - 1;
    must(last === (tier.upToCents === null), `${field}.${i}.upToCents`, tier.upToCents, 'must be open for the last tier alone');
    const bound = tier.upToCents ?? Number.MAX_SAFE_INTEGER;
    must(bound > below, `${field}.${i}.upToCents`, bound, 'must be more than the tier before');
    const part = Math.max(0, minus(Math.min(size, bound), below));
    below = bound;
    const charge = percentOf(part, tier.rate, field);
    return { tier, part: cents(negative ? -part : part), charge: cents(negative ? -charge : charge) };
  });
}
