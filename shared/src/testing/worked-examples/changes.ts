import { priceChange, type MarkupTerms, type PriceLine, type PricedChange, type PricingTerms, type Tier } from '../../pricing/index.ts';
import { dollars, type Example } from './example.ts';

type Item = [kind: PriceLine['class'], cost: string];
const none = { overheadRate: 0, profitRate: 0 };
const plain: PricingTerms = { mode: 'markup', own: none, subcontract: none, profitOn: 'cost', laborBurdenRate: 0, tax: { on: 'materials', rate: 0 }, deducts: 'give_back', flatFeeCents: 0, insuranceRate: 0 };
const price = (items: Item[], terms: Partial<PricingTerms> | MarkupTerms, effect: PriceLine['effect'] = 'add'): PricedChange =>
  priceChange({ lines: items.map(([kind, unitCost], i) => ({ id: String(i), description: kind, class: kind, effect, quantity: '1', unit: 'ea', unitCost, taxable: false })), terms: { ...plain, ...terms } as PricingTerms });
const printed = (...cents: number[]) => cents.map(dollars);

const scale: Tier[] = [{ upToCents: 2_000_000, rate: 1000 }, { upToCents: 5_000_000, rate: 750 }, { upToCents: null, rate: 500 }];
const noProfit: Tier[] = [{ upToCents: null, rate: 0 }];

export const changes: readonly Example[] = [
  {
    id: 'WE-B1',
    what: 'a sliding scale, in the reading where profit\'s tiers apply to cost and overhead together; own figures',
    source: 'VAAR 852.243-70(b)(1) (SEP 2019)',
    figures: ['800.00', '880.00', '9680.00', '2000.00', '2150.00', '24150.00', '3125.00', '3359.38', '41484.38', '4250.00', '4462.50', '58712.50', '4750.00', '4987.50', '69737.50', '8000.00', '8400.00', '141400.00'],
    compute: () => ['8000', '20000', '35000', '50000', '60000', '125000'].flatMap((cost) => {
      const p = price([['material', cost]], { mode: 'tiers', overhead: scale, profit: scale });
      return printed(p.overheadCents, p.profitCents, p.priceCents);
    }),
  },
  {
    id: 'WE-B3',
    what: 'the prime\'s fee on a subcontractor\'s price by the same scale, own figures',
    source: 'VAAR 852.243-70(b)(1)',
    figures: ['1000.00', '1100.00', '12100.00', '1210.00', '13310.00'],
    compute: () => {
      const sub = price([['material', '10000']], { mode: 'tiers', overhead: scale, profit: scale });
      const prime = price([['subcontract', dollars(sub.priceCents)]], { mode: 'tiers', overhead: scale, profit: noProfit });
      return printed(sub.overheadCents, sub.profitCents, sub.priceCents, prime.markupCents, prime.priceCents);
    },
  },
  {
    // the clause lets the prime mark up the subcontractor's direct cost alone: its own mark-up enters as a fee, which bears none
    id: 'WE-B4',
    what: 'no mark-up on mark-up, bond last; own figures',
    source: 'GSAR 552.243-71(h)(1)-(9) (Mar 2019)',
    figures: ['1200.00', '1120.00', '900.00', '690.00', '7590.00', '600.00', '20510.00', '246.12', '20756.12'],
    compute: () => {
      const prime = { mode: 'markup' as const, own: { overheadRate: 1200, profitRate: 1000 }, subcontract: none, profitOn: 'cost_and_overhead' as const };
      const own = price([['material', '10000']], prime);
      const sub = price([['material', '6000']], { ...prime, own: { overheadRate: 1500, profitRate: 1000 } });
      const onSub = { ...prime, subcontract: { overheadRate: 1000, profitRate: 0 } };
      const whole = price([['material', '10000'], ['subcontract', '6000'], ['fee', dollars(sub.markupCents)]], { ...onSub, insuranceRate: 120 } as PricingTerms);
      return printed(own.overheadCents, own.profitCents, sub.overheadCents, sub.profitCents, sub.priceCents, whole.markupCents - own.markupCents, whole.sumCents, whole.insuranceCents, whole.priceCents);
    },
  },
  {
    // its classes have rates of their own, so each is priced by itself
    id: 'WE-B5',
    what: 'a county letter\'s mark-ups, added and deducted',
    source: 'Marion County OR, Courthouse Square change pricing letter (doc 3663993 p. 19)',
    figures: ['8467.00', '-8467.00'],
    compute: () => (['add', 'deduct'] as const).map((effect) => {
      const parts: [Item, number][] = [[['labor', '2400'], 1500], [['equipment', '350'], 1000], [['material', '3120'], 1000], [['subcontract', '1800'], 500]];
      return dollars(parts.reduce((a, [item, overheadRate]) => a + price([item], { mode: 'markup', own: { overheadRate, profitRate: 0 }, subcontract: { overheadRate, profitRate: 0 }, profitOn: 'cost' }, effect).priceCents, 0));
    }),
  },
  {
    // profit leaves out equipment and what is added to labor: both enter as fees, which bear none
    id: 'WE-B6',
    what: 'extra work at cost plus, own figures',
    source: 'Indian River County FL contract documents 255852 p. 17, item 3(a)-(d)',
    figures: ['1380.00', '210.00', '2790.00'],
    compute: () => {
      const labor = price([['labor', '1200']], { laborBurdenRate: 1500 });
      const whole = price([['labor', '1200'], ['material', '900'], ['fee', '300'], ['fee', dollars(labor.laborBurdenCents)]], { mode: 'markup', own: { overheadRate: 0, profitRate: 1000 }, subcontract: none, profitOn: 'cost' });
      return printed(labor.priceCents, whole.profitCents, whole.priceCents);
    },
  },
];
