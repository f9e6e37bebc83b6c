import { given, money, must, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, divideRounded, minus, percentExact, percentOf, sum, type Cents } from '../money/index.ts';
import { byTiers, tierSteps } from './tiers.ts';
import type { GroupRates, MarkupTerms } from './types.ts';

export interface Markup {
  overheadCents: Cents;
  profitCents: Cents;
  steps: () => Step[];
}

/** Overhead and profit on the net cost of own work and subcontract work, in one of three modes. Throws InvalidInput. */
export function markUp(terms: MarkupTerms, ownCost: Cents, subcontractCost: Cents): Markup {
  switch (terms.mode) {
    case 'markup':
      return byRates(terms, ownCost, subcontractCost);
    case 'margin':
      return byMargin(terms.marginRate, sum([ownCost, subcontractCost]));
    case 'tiers': {
      const cost = sum([ownCost, subcontractCost]);
      const overheadCents = byTiers(cost, terms.overhead, 'terms.overhead');
      const base = sum([cost, overheadCents]);
      const profitCents = byTiers(base, terms.profit, 'terms.profit');
      const steps = () => [
        step('Overhead', 'by marginal tiers on the net cost', money(overheadCents), tierSteps(cost, terms.overhead)),
        step('Profit', 'by marginal tiers on net cost + overhead', money(profitCents), tierSteps(base, terms.profit)),
      ];
      return { overheadCents, profitCents, steps };
    }
  }
}

function byRates(terms: Extract<MarkupTerms, { mode: 'markup' }>, ownCost: Cents, subcontractCost: Cents): Markup {
  const groups = [
    { name: 'own work', cost: ownCost, rates: terms.own, field: 'terms.own' },
    { name: 'subcontract work', cost: subcontractCost, rates: terms.subcontract, field: 'terms.subcontract' },
  ].map(({ name, cost, rates, field }) => ({ name, cost, rates, ...onGroup(cost, rates, terms.profitOn, field) }));
  const steps = () =>
    groups
      .filter(({ cost }) => cost !== 0)
      .flatMap(({ name, cost, rates, overhead, profit, profitBase }) => [
        step(`Overhead on ${name}`, 'rate × net cost, to the cent', money(overhead), [given(`net cost of ${name}`, money(cost)), given('rate', rate(rates.overheadRate))], percentExact(cost, rates.overheadRate)),
        step(
          `Profit on ${name}`,
          terms.profitOn === 'cost' ? 'rate × net cost, to the cent' : 'rate × (net cost + overhead), to the cent',
          money(profit),
          [given('base', money(profitBase)), given('rate', rate(rates.profitRate))],
          percentExact(profitBase, rates.profitRate),
        ),
      ]);
  return { overheadCents: sum(groups.map(({ overhead }) => overhead)), profitCents: sum(groups.map(({ profit }) => profit)), steps };
}

function onGroup(cost: Cents, rates: GroupRates, profitOn: 'cost' | 'cost_and_overhead', field: string) {
  const overhead = percentOf(cost, basisPoints(rates.overheadRate, `${field}.overheadRate`));
  const profitBase = profitOn === 'cost' ? cost : sum([cost, overhead]);
  return { overhead, profitBase, profit: percentOf(profitBase, basisPoints(rates.profitRate, `${field}.profitRate`)) };
}

const WHOLE = 10_000;

/** Mark-up so that it is the given share of the price: cost ÷ (1 − margin) − cost. */
function byMargin(marginRate: number, cost: Cents): Markup {
  basisPoints(marginRate, 'terms.marginRate');
  must(marginRate < WHOLE, 'terms.marginRate', marginRate, 'must be less than 100 %');
  const price = divideRounded(BigInt(cost) * BigInt(WHOLE), BigInt(WHOLE - marginRate), 'price');
  const profitCents = minus(price, cost);
  const steps = () => [step('Mark-up', 'net cost ÷ (1 − margin) − net cost, to the cent', money(profitCents), [given('net cost', money(cost)), given('margin', rate(marginRate))])];
  return { overheadCents: 0, profitCents, steps };
}
