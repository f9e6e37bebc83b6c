import { given, money, must, quantity, rate, step, type Step } from '../arithmetic/index.ts';
import { atLeastZero, basisPoints, cents, extend, extendExact, minus, percentExact, percentOf, sum, tenThousandths, type Cents } from '../money/index.ts';
import { markUp, type Markup } from './markup.ts';
import { lineClasses, type LineClass, type PriceLine, type PriceOptions, type PricedChange, type PricingTerms } from './types.ts';

export interface PriceInput {
  lines: readonly PriceLine[];
  terms: PricingTerms;
  /** The firm bears it: the price is worked out all the same, the homeowner is charged 0. */
  noCharge?: boolean;
}

const MOST_LINES = 10_000;

/**
 * The price of a change from its lines and the agreed terms, in cents. Each line is rounded once; burden, tax, each mark-up,
 * insurance and tax on the price are rounded once each, half away from zero. The order of lines never matters.
 * Throws InvalidInput naming the field.
 */
export function priceChange({ lines, terms, noCharge = false }: PriceInput, options: PriceOptions = {}): PricedChange {
  const parts = costs(lines, terms);
  const { ownCostCents, subcontractCostCents, feesCents } = parts;
  const netCostCents = sum([ownCostCents, subcontractCostCents]);
  const marked = markUp(terms, ownCostCents, subcontractCostCents);
  const asComputed = sum([marked.overheadCents, marked.profitCents]);
  const markupCents = terms.deducts === 'keep' ? atLeastZero(asComputed) : asComputed;
  const flatFeeCents = cents(terms.flatFeeCents, 'terms.flatFeeCents');
  must(flatFeeCents >= 0, 'terms.flatFeeCents', flatFeeCents, 'must not be negative');
  const sumCents = sum([netCostCents, markupCents, feesCents, flatFeeCents]);
  const insuranceCents = percentOf(sumCents, basisPoints(terms.insuranceRate, 'terms.insuranceRate'));
  const insured = sum([sumCents, insuranceCents]);
  const priceTaxCents = terms.tax.on === 'price' ? percentOf(insured, terms.tax.rate) : 0;
  const priceCents = sum([insured, priceTaxCents]);
  const priced = {
    ...parts,
    netCostCents,
    overheadCents: marked.overheadCents,
    profitCents: marked.profitCents,
    markupCents,
    flatFeeCents,
    sumCents,
    insuranceCents,
    priceTaxCents,
    priceCents,
    chargedCents: noCharge ? 0 : priceCents,
  };
  return { ...priced, steps: options.steps === false ? null : explain(lines, terms, priced, marked) };
}

function costs(lines: readonly PriceLine[], terms: PricingTerms) {
  must(lines.length <= MOST_LINES, 'lines', lines, `must be at most ${MOST_LINES} lines`);
  const ids = new Set<string>();
  const priced = lines.map((line, i) => {
    must(!ids.has(line.id), `lines.${i}.id`, line.id, 'must be named once');
    ids.add(line.id);
    return { line, cents: lineCents(line, `lines.${i}`) };
  });
  const net = (...classes: LineClass[]) => sum(priced.filter(({ line }) => classes.includes(line.class)).map((found) => found.cents));
  const laborBurdenCents = percentOf(net('labor'), basisPoints(terms.laborBurdenRate, 'terms.laborBurdenRate', 0, 30_000));
  const taxable = sum(priced.filter(({ line }) => line.taxable).map((found) => found.cents));
  basisPoints(terms.tax.rate, 'terms.tax.rate');
  const materialsTaxCents = terms.tax.on === 'materials' ? percentOf(taxable, terms.tax.rate) : 0;
  return {
    lines: priced.map(({ line, cents: amount }) => ({ id: line.id, cents: amount })),
    laborBurdenCents,
    materialsTaxCents,
    ownCostCents: sum([net('labor', 'material', 'equipment'), laborBurdenCents, materialsTaxCents]),
    subcontractCostCents: net('subcontract'),
    feesCents: net('fee'),
  };
}

/** One line: quantity × unit cost to the cent, negative where it is deducted. Throws InvalidInput. */
export function lineCents(line: PriceLine, field = 'line'): Cents {
  must(lineClasses.includes(line.class), `${field}.class`, line.class, `must be one of ${lineClasses.join(', ')}`);
  must(line.effect === 'add' || line.effect === 'deduct', `${field}.effect`, line.effect, 'must add or deduct');
  must(tenThousandths(line.quantity, `${field}.quantity`) >= 0n, `${field}.quantity`, line.quantity, 'must not be negative: deduct the line instead');
  must(tenThousandths(line.unitCost, `${field}.unitCost`) >= 0n, `${field}.unitCost`, line.unitCost, 'must not be negative: deduct the line instead');
  const amount = extend(line.quantity, line.unitCost, field);
  return line.effect === 'deduct' ? cents(-amount, field) : amount;
}

type Parts = Omit<PricedChange, 'steps'>;

function explain(lines: readonly PriceLine[], terms: PricingTerms, priced: Parts, marked: Markup): Step {
  const amount = new Map(priced.lines.map((line) => [line.id, line.cents]));
  const of = (...classes: LineClass[]) => lines.filter((line) => classes.includes(line.class)).map((line) => lineStep(line, amount.get(line.id) ?? 0));
  const labor = lines.filter((line) => line.class === 'labor');
  const laborNet = sum(labor.map((line) => amount.get(line.id) ?? 0));
  const own = [...of('labor', 'material', 'equipment')];
  if (priced.laborBurdenCents !== 0) {
    own.push(step('Labor burden', 'rate × net labor, to the cent', money(priced.laborBurdenCents), [given('net labor', money(laborNet)), given('rate', rate(terms.laborBurdenRate))], percentExact(laborNet, terms.laborBurdenRate)));
  }
  if (priced.materialsTaxCents !== 0) {
    own.push(step('Sales tax on materials', 'rate × taxable lines, to the cent', money(priced.materialsTaxCents), [given('rate', rate(terms.tax.rate))]));
  }
  const kept = sum([priced.overheadCents, priced.profitCents]) !== priced.markupCents;
  const inputs = [
    step('Own work', 'adds − deducts, with burden and tax', money(priced.ownCostCents), own),
    step('Subcontract work', 'adds − deducts', money(priced.subcontractCostCents), of('subcontract')),
    step('Mark-up', kept ? 'a negative mark-up is kept: 0' : 'overhead + profit', money(priced.markupCents), marked.steps()),
    step('Fees', 'adds − deducts', money(priced.feesCents), of('fee')),
    given('Fee per change', money(priced.flatFeeCents)),
    step('Insurance or bond', 'rate × (cost + mark-up + fees), to the cent', money(priced.insuranceCents), [given('base', money(priced.sumCents)), given('rate', rate(terms.insuranceRate))], percentExact(priced.sumCents, terms.insuranceRate)),
    step('Tax on the price', 'rate × (sum + insurance), to the cent', money(priced.priceTaxCents), [given('rate', rate(terms.tax.on === 'price' ? terms.tax.rate : 0))]),
  ];
  const shown = inputs.filter((input) => input.result.kind !== 'money' || input.result.cents !== 0);
  const price = step('Price', 'sum of its parts', money(priced.priceCents), shown);
  return priced.chargedCents === priced.priceCents ? price : step('Charged', 'a no-charge change: the firm bears it', money(minus(priced.chargedCents, 0)), [price]);
}

function lineStep(line: PriceLine, amount: Cents): Step {
  const inputs = [given('quantity', quantity(line.quantity, line.unit)), given('unit cost', quantity(line.unitCost, `$ per ${line.unit}`))];
  const rule = line.effect === 'deduct' ? 'quantity × unit cost, to the cent, deducted' : 'quantity × unit cost, to the cent';
  return step(line.description, rule, money(amount), inputs, extendExact(line.quantity, line.unitCost));
}
