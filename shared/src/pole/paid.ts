import { cents, split, sum, type Cents } from '../money/index.ts';

/** A draw as far as money went: what it billed on each milestone (null: general lines), and what was paid on it, deposit included. */
export interface PaidDraw {
  billed: readonly { milestoneId: string | null; cents: Cents }[];
  paidCents: Cents;
}

/** What of each milestone is paid: the money of each draw laid out over what the draw billed, to the cent; what is retained isn't paid. Throws InvalidInput. */
export function paidByMilestone(draws: readonly PaidDraw[]): Map<string | null, Cents> {
  const paid = new Map<string | null, Cents>();
  for (const [n, draw] of draws.entries()) {
    draw.billed.forEach((part, i) => cents(part.cents, `draws.${n}.billed.${i}.cents`));
    const billed = draw.billed.filter((part) => part.cents > 0);
    if (billed.length === 0 || cents(draw.paidCents, `draws.${n}.paidCents`) <= 0) continue;
    const most = Math.min(draw.paidCents, sum(billed.map((part) => part.cents)));
    split(most, billed.map((part) => part.cents)).forEach((part, i) => {
      const id = billed[i]?.milestoneId ?? null;
      paid.set(id, sum([paid.get(id) ?? 0, part]));
    });
  }
  return paid;
}
