import { computeDraw, firstState, type DrawLine, type DrawState } from '../../draw/index.ts';
import { sum } from '../../money/index.ts';
import { dollars, inCents, type Example } from './example.ts';

/** A printed column: items, extra work, adjustments, materials on hand, mobilization that nothing is retained on, deductions. */
type Column = readonly [items: string, extra: string, adjustments: string, onHand: string, mobilization: string, deductions: string];

interface Voucher {
  toDate: Column;
  thisEstimate: Column;
  /** The last one, with its retention let go. */
  final?: boolean;
}

/** The voucher as the draw it is, and the one before it. Lines are as large as what is billed: a voucher has no schedule of values. */
function asDraws({ toDate, thisEstimate, final = false }: Voucher) {
  const now = toDate.map(inCents);
  const before = now.map((cents, i) => cents - inCents(thisEstimate[i] ?? '0'));
  const draw = (column: number[], state: DrawState) => {
    const [items = 0, extra = 0, adjustments = 0, onHandCents = 0, mobilization = 0, deductions = 0] = column;
    const line = (id: string, workCents: number, more: Partial<DrawLine> = {}): DrawLine => ({ id, description: id, scheduledCents: workCents + (more.onHandCents ?? 0), workCents, onHandCents: 0, approvedWorkCents: 0, approvedOnHandCents: 0, ...more });
    const lines = [line('items', items, { onHandCents }), line('extra', extra), line('adjustments', adjustments), line('mobilization', mobilization, { exempt: true })];
    const release = final ? { at: 'final' as const } : { at: 'none' as const };
    return computeDraw({ style: 'percent_complete', contractSumAsSignedCents: sum(lines.map((l) => l.scheduledCents)), changesApprovedCents: 0, lines, retainage: { workRate: 500, materialsRate: 500 }, release, deposit: { depositCents: 0, use: 'first' }, withheldCents: -deductions, before: state, throughOn: '2027-03-15', isFinal: final, reserveOver: final });
  };
  const last = draw(before, firstState);
  return { last, now: draw(now, last.after) };
}

/** Paid to date, work without materials, and paid now; with the retention to date, before and of this period where it was still held. */
function figuresOf(voucher: Voucher): string[] {
  const { last, now } = asDraws(voucher);
  const { summary: s } = now;
  return [s.earnedToDateCents - s.withheldCents, s.workInPlaceCents, s.dueNowCents].map(dollars).concat(voucher.final ? [] : [dollars(s.retainageHeldCents - last.summary.retainageHeldCents)]);
}

const source = 'Caltrans, payment vouchers, petsfiles.dot.ca.gov/hq/construc/vouchers';
const voucher = (number: string, given: Voucher, figures: string[], retained: string | null): Example => ({
  id: `WE-A5-${number}`,
  what: 'a state\'s printed voucher: paid to date, work, paid now',
  source: `${source}, ${number}`,
  figures,
  compute: () => {
    const all = figuresOf(given);
    // the retention of the period stands beside the expected figures in the list, so it is compared here
    if (retained !== null && all[3] !== retained) throw new Error(`retention of this period: ${all[3] ?? 'none'}, printed ${retained}`);
    return all.slice(0, 3);
  },
});

export const vouchers: readonly Example[] = [
  voucher('04-253794-019', { toDate: ['27662734.78', '1236755.80', '-484451.70', '7226.82', '2800000.00', '0'], thisEstimate: ['678837.91', '9782.40', '0', '-34137.41', '0', '0'] }, ['29801152.41', '31215038.88', '621758.75'], '32724.15'),
  voucher('03-3M0004-004', { final: true, toDate: ['1047479.89', '23701.00', '-5000.00', '0', '0', '0'], thisEstimate: ['0', '0', '-5000.00', '0', '0', '30000.00'] }, ['1066180.89', '1066180.89', '25000.00'], null),
  voucher('03-1A1814-019', { toDate: ['759915.25', '12761.78', '25236.00', '0', '152913.00', '-42119.71'], thisEstimate: ['7306.67', '2179.00', '0', '0', '0', '5000.00'] }, ['868810.67', '950826.03', '14011.39'], '474.28'),
  voucher('04-163624-009', { toDate: ['1638633.31', '9320.76', '-12493.01', '25687.60', '0', '0'], thisEstimate: ['81733.16', '9320.76', '-12493.01', '-25687.60', '0', '0'] }, ['1578091.23', '1635461.06', '50229.65'], '2643.66'),
];
