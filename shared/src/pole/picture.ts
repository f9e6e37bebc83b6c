import { must } from '../arithmetic/index.ts';
import { cents, divideRounded, formatMoney, sum, type Cents } from '../money/index.ts';
import type { Band, PoleInput, PoleMilestone, PolePicture, PoleRow } from './types.ts';

const LEAST_LABEL = 30;
const TENTHS = 10;
const WHOLE = 10_000n;
const GENERAL = 'General';

type Part = Omit<PoleMilestone, 'id' | 'state'> & { id: string | null; state: PoleMilestone['state'] | null };

/**
 * The rod's geometry for a height in any unit: bands in proportion to their scheduled value, from the ground up, fills in proportion to
 * what is proven, billed and paid and never above the band. A pole without money has bands of equal height. Throws InvalidInput.
 */
export function polePicture(input: PoleInput, height: number): PolePicture {
  must(height > 0 && Number.isFinite(height), 'height', height, 'must be more than zero');
  const parts = partsOf(input);
  const total = sum(parts.map((part) => Math.max(0, part.scheduledCents)));
  const bands: Band[] = [];
  let below = 0;
  for (const part of parts) {
    const share = total > 0 ? Math.max(0, part.scheduledCents) / total : 1 / parts.length;
    const bandHeight = height * share;
    const top = height - below - bandHeight;
    bands.push(bandOf(part, top, bandHeight, input.prices));
    below += bandHeight;
  }
  const expected = input.expectedTodayCents === null || total === 0 ? null : Math.min(1, Math.max(0, cents(input.expectedTodayCents, 'expectedTodayCents') / total));
  return {
    height,
    bands,
    graduations: Array.from({ length: TENTHS + 1 }, (_, i) => ({ top: height - (height * i) / TENTHS, percent: i * TENTHS })),
    pointerTop: expected === null ? null : height * (1 - expected),
  };
}

/** What the picture says, as rows. */
export const poleRows = (input: PoleInput): PoleRow[] =>
  partsOf(input).map(({ name, scheduledCents, provenCents, billedCents, paidCents }) => ({ name, scheduledCents, provenCents, billedCents, paidCents }));

function partsOf({ milestones, general }: PoleInput): Part[] {
  const parts: Part[] = milestones.map((milestone, i) => {
    check(milestone, `milestones.${i}`);
    return milestone;
  });
  check(general, 'general');
  if (general.scheduledCents > 0) parts.push({ ...general, id: null, name: GENERAL, state: null, changes: [] });
  return parts;
}

function check(part: { scheduledCents: Cents; provenCents: Cents; billedCents: Cents; paidCents: Cents }, field: string): void {
  for (const name of ['scheduledCents', 'provenCents', 'billedCents', 'paidCents'] as const) cents(part[name], `${field}.${name}`);
}

function bandOf(part: Part, top: number, height: number, prices: boolean): Band {
  const fill = (amount: Cents) => (part.scheduledCents > 0 ? height * Math.min(1, Math.max(0, amount / part.scheduledCents)) : 0);
  const spacing = height / (part.changes.length + 1);
  return {
    id: part.id,
    name: part.name,
    top,
    height,
    provenHeight: fill(part.provenCents),
    billedHeight: fill(part.billedCents),
    paidHeight: fill(part.paidCents),
    showsLabel: height >= LEAST_LABEL,
    caption: captionOf(part, prices),
    notches: part.changes.map((change, i) => ({ id: change.id, label: change.label, pending: change.pending, top: top + height - spacing * (i + 1) })),
  };
}

/** The band in a few words: what matters most about it now. */
function captionOf(part: Part, prices: boolean): string {
  const whole = part.scheduledCents;
  if (whole > 0 && part.provenCents >= whole) {
    if (!prices) return 'proven';
    const money = part.paidCents >= whole ? 'paid' : part.billedCents >= whole ? 'billed' : part.billedCents > 0 ? 'partly billed' : 'to be billed';
    return `proven, ${money}`;
  }
  if (part.state === 'claimed') return 'claimed, waits for proof';
  if (whole > 0 && part.provenCents > 0) return `${Math.floor((part.provenCents / whole) * 100)} % in place`;
  return prices ? formatMoney(whole).replace(/\.00$/, '') : part.state === 'under_way' ? 'under way' : 'not begun';
}

/** The same pole for somebody who may not see prices: every amount as its share of 10,000 of the whole. */
export function withoutPrices(input: PoleInput): PoleInput {
  const total = sum(partsOf(input).map((part) => Math.max(0, part.scheduledCents)));
  const share = (amount: Cents): number => (total > 0 ? divideRounded(BigInt(amount) * WHOLE, BigInt(total)) : 0);
  const blind = <T extends PoleInput['general']>(part: T): T => ({ ...part, scheduledCents: share(part.scheduledCents), provenCents: share(part.provenCents), billedCents: 0, paidCents: 0 });
  return {
    milestones: input.milestones.map(blind),
    general: blind(input.general),
    expectedTodayCents: input.expectedTodayCents === null ? null : share(cents(input.expectedTodayCents, 'expectedTodayCents')),
    prices: false,
  };
}
