import { computeDraw, firstState, withholdingLimit, type DrawInput, type DrawState } from '../../draw/index.ts';
import { percentOf, sum } from '../../money/index.ts';
import { dollars, inCents, type Example } from './example.ts';

const draw = (signed: string, changes: string, work: string, stored: string, rates: [number, number], before: DrawState, more: Partial<DrawInput> = {}) =>
  computeDraw({
    style: 'percent_complete',
    contractSumAsSignedCents: inCents(signed),
    changesApprovedCents: inCents(changes),
    lines: [{ id: 'all', description: 'All', scheduledCents: sum([inCents(signed), inCents(changes)]), workCents: inCents(work), onHandCents: inCents(stored), approvedWorkCents: 0, approvedOnHandCents: 0 }],
    retainage: { workRate: rates[0], materialsRate: rates[1] },
    release: { at: 'none' },
    deposit: { depositCents: 0, use: 'first' },
    withheldCents: 0,
    before,
    throughOn: '2027-03-15',
    isFinal: false,
    ...more,
  }).summary;

const added = (...printed: string[]) => dollars(sum(printed.map(inCents)));

export const payments: readonly Example[] = [
  {
    id: 'WE-A6',
    what: 'extra work on printed estimates adds up',
    source: 'Caltrans petsfiles.dot.ca.gov/hq/construc/estdet 02-383004-008, 03-3E3604-004, 08-4612U4-005',
    figures: ['18461.98', '356365.90', '20780.59', '370832.74', '434142.94'],
    compute: () => {
      const a = added('5501.98', '12960.00');
      const b = added('1009.71', '484.87', '1049.67', '1169.53', '969.76', '969.76', '1129.58', '1049.67', '787.94', '909.15', '757.63', '727.32', '9766.00');
      const c = added('441.06', '411.33', '474.11', '457.58', '442.72', '442.72', '441.06', '441.06', '426.20', '465.06', '217.08', '36795.34', '20277.26', '309100.16');
      return [a, added(a, '337903.92'), b, c, added(c, '63310.20')];
    },
  },
  {
    // the city rounds each invoice; our draws round the cumulative figure once (71,255.50 here, one cent more than its six parts)
    id: 'WE-A8',
    what: 'a city\'s ledger: 10 % of each invoice, and what was released',
    source: 'City of Carmel, Indiana, portal id 925719 (2011-05-31)',
    figures: ['9431.33', '17264.44', '5858.89', '2743.22', '11884.61', '24073.00', '85440.60'],
    compute: () => {
      const retained = ['94313.33', '172644.44', '58588.89', '27432.22', '118846.10', '240730.01'].map((invoice) => dollars(percentOf(inCents(invoice), 1000)));
      return [...retained, added('1244.50', ...retained, '-12931.24', '12931.25', '12940.60')];
    },
  },
  {
    id: 'WE-A9',
    what: 'a federal partial payment estimate, own figures',
    source: 'Form RD 1924-18 (Rev. 6-97) lines 1-9',
    figures: ['420650.00', '200670.00', '59265.00'],
    compute: () => {
      const s = draw('412000.00', '8650.00', '186420.00', '14250.00', [1000, 1000], { ...firstState, earnedCents: 12_133_800 });
      return [s.contractSumTodayCents, sum([s.workInPlaceCents, s.materialsOnHandCents]), s.dueNowCents].map(dollars);
    },
  },
  {
    id: 'WE-A10',
    what: 'a county form with two rates of retainage, own figures',
    source: 'Orange County NC, application form lines 1-9; Idaho DPW, request for payment lines 1-8',
    figures: ['246800.00', '128000.00', '115680.00', '31530.00', '131120.00'],
    compute: () => {
      const s = draw('250000.00', '-3200.00', '118400.00', '9600.00', [1000, 500], { ...firstState, earnedCents: 8_415_000 });
      return [s.contractSumTodayCents, sum([s.workInPlaceCents, s.materialsOnHandCents]), s.earnedToDateCents, s.dueNowCents, s.leftToBillCents].map(dollars);
    },
  },
  {
    id: 'WE-A11',
    what: 'ten percent held of each release, own figures',
    source: 'HUD Mortgagee Letter 92-33 item 1.A',
    figures: ['13500.00', '20250.00', '7500.00', '4583.33'],
    compute: () => {
      let [work, earnedCents, heldCents] = [0, 0, 0];
      const paid = ['15000.00', '22500.00', '8333.33'].map((release) => {
        work += inCents(release);
        const s = draw('100000.00', '0', dollars(work), '0', [1000, 1000], { ...firstState, earnedCents });
        [earnedCents, heldCents] = [s.earnedToDateCents, s.retainageHeldCents];
        return dollars(s.dueNowCents);
      });
      return [...paid, dollars(heldCents)];
    },
  },
  {
    id: 'WE-A13',
    what: 'limits of a withholding, own figures',
    source: 'Cal. Civ. Code 8800(b), 8812(c), 8814(c); Tex. Prop. Code 28.003(a), (b)',
    figures: ['3600.00', '2640.00', '2400.00'],
    compute: () => [15_000, 11_000, 10_000].map((limit) => dollars(withholdingLimit(240_000, limit))),
  },
];
