import { given, money, must, rate, step, type Step } from '../arithmetic/index.ts';
import { basisPoints, cents, divideRounded, fixed, percentOf, split, sum, type BasisPoints, type Cents } from '../money/index.ts';
import type { DrawLine, RetainageRelease, RetainageTerms } from './types.ts';

const WHOLE = 10_000n;

export interface RetainageInput {
  lines: readonly DrawLine[];
  terms: RetainageTerms;
  release: RetainageRelease;
  contractSumTodayCents: Cents;
  latchedCents: Cents | null;
  reserveOver: boolean;
}

export interface Retainage {
  heldCents: Cents;
  latchedCents: Cents | null;
  perLine: Cents[];
  explain: () => Step;
}

/**
 * What is held to date, on cumulative figures: the sum of the lines' exact shares rounded once, then step, cap, release and reserve.
 * Per line, the cents are laid out by largest remainder. Throws InvalidInput.
 */
export function retain(input: RetainageInput): Retainage {
  const { lines, terms, release, contractSumTodayCents, reserveOver } = input;
  check(terms);
  const exact = lines.map((line) => (line.exempt ? 0n : exactShare(line, terms)));
  const subject = sum(lines.filter((line) => !line.exempt).map((line) => sum([line.workCents, line.onHandCents])));
  const { byRate, latchedCents, rule } = atRates(terms, exact, subject, contractSumTodayCents, input.latchedCents);
  const billed = sum(lines.map((line) => sum([line.workCents, line.onHandCents])));
  const cap = terms.capRate === undefined ? null : percentOf(contractSumTodayCents, terms.capRate);
  const reserve = reserveOver || terms.reserveRate === undefined ? 0 : percentOf(billed, terms.reserveRate);
  const capped = cap === null ? byRate : Math.min(byRate, cap);
  const released = letGo(capped, release);
  // the cap is a ceiling of law or contract: a reserve can't lift what is held above it
  const floor = cap === null ? reserve : Math.min(reserve, cap);
  const heldCents = release.at === 'final' && reserveOver ? 0 : cents(Math.max(released, floor, 0), 'retainage');
  const explain = () =>
    step('Retainage held', 'at the rates, within the cap, less what is released, not below the reserve', money(heldCents), [
      step('At the rates', rule, money(byRate), [given('subject to retainage', money(subject)), given('on work', rate(terms.workRate)), given('on materials', rate(terms.materialsRate))], exactText(exact)),
      ...(cap === null ? [] : [step('Cap', 'share of the contract sum today', money(cap), [given('rate', rate(terms.capRate ?? 0))])]),
      ...(release.at === 'none' ? [] : [given('After release', money(released))]),
      ...(reserve === 0 ? [] : [step('Reserve', 'share of what is billed', money(reserve), [given('rate', rate(terms.reserveRate ?? 0))])]),
    ]);
  return { heldCents, latchedCents, perLine: layOut(heldCents, exact), explain };
}

function check(terms: RetainageTerms): void {
  basisPoints(terms.workRate, 'retainage.workRate');
  basisPoints(terms.materialsRate, 'retainage.materialsRate');
  if (terms.capRate !== undefined) basisPoints(terms.capRate, 'retainage.capRate');
  if (terms.reserveRate !== undefined) basisPoints(terms.reserveRate, 'retainage.reserveRate');
  const { step: lowered } = terms;
  if (!lowered) return;
  must(terms.workRate === terms.materialsRate, 'retainage.materialsRate', terms.materialsRate, 'must equal the rate on work where there is a step');
  basisPoints(lowered.thresholdRate, 'retainage.step.thresholdRate');
  basisPoints(lowered.rate, 'retainage.step.rate', 0, terms.workRate);
}

/** Ten-thousandths of a cent. */
const exactShare = (line: DrawLine, terms: RetainageTerms): bigint => BigInt(line.workCents) * BigInt(terms.workRate) + BigInt(line.onHandCents) * BigInt(terms.materialsRate);

const exactText = (exact: readonly bigint[]): string => fixed(exact.reduce((a, b) => a + b, 0n), 6);

function atRates(terms: RetainageTerms, exact: readonly bigint[], subject: Cents, contractSumToday: Cents, latchedBefore: Cents | null) {
  const { step: lowered } = terms;
  const plain = divideRounded(exact.reduce((a, b) => a + b, 0n), WHOLE, 'retainage');
  if (!lowered) return { byRate: plain, latchedCents: null, rule: 'rate × what is subject to it, to date, rounded once' };
  const threshold = percentOf(contractSumToday, lowered.thresholdRate);
  // once reached it stays, whatever the contract sum does later
  const latchedCents = latchedBefore ?? (subject >= threshold ? threshold : null);
  if (latchedCents === null) return { byRate: plain, latchedCents, rule: 'rate × what is subject to it, to date, rounded once' };
  if (lowered.on === 'all_work') {
    return { byRate: percentOf(subject, lowered.rate), latchedCents, rule: 'the threshold was reached: the lower rate × everything subject to it' };
  }
  const below = BigInt(Math.min(subject, latchedCents)) * BigInt(terms.workRate);
  const above = BigInt(Math.max(0, subject - latchedCents)) * BigInt(lowered.rate);
  return { byRate: divideRounded(below + above, WHOLE, 'retainage'), latchedCents, rule: 'the threshold was reached: the rate up to it, the lower rate beyond' };
}

function letGo(held: Cents, release: RetainageRelease): Cents {
  if (release.at === 'none') return held;
  if (release.at === 'final') return 0;
  if ('keepRate' in release) return percentOf(held, basisPoints(release.keepRate, 'release.keepRate'));
  must(release.punchListCents >= 0, 'release.punchListCents', release.punchListCents, 'must not be negative');
  const multiple = divideRounded(BigInt(cents(release.punchListCents, 'release.punchListCents')) * BigInt(basisPoints(release.multipleRate, 'release.multipleRate', 0, 50_000)), WHOLE);
  return Math.min(held, multiple);
}

// weights beyond the safe range would lose digits: shares are scaled down together, which changes at most who gets a left-over cent
function layOut(held: Cents, exact: readonly bigint[]): Cents[] {
  const most = exact.reduce((a, b) => (b > a ? b : a), 0n);
  if (held === 0 || most === 0n) return exact.map(() => 0);
  const scale = most / BigInt(Number.MAX_SAFE_INTEGER) + 1n;
  return split(held, exact.map((share) => (share > 0n ? Number(share / scale) : 0)));
}

/** A withholding's ceiling: the state's share of the disputed sum (150 % or 110 % in statutes). Defer to counsel. Throws InvalidInput. */
export function withholdingLimit(disputedCents: Cents, limitRate: BasisPoints): Cents {
  must(cents(disputedCents, 'disputedCents') >= 0, 'disputedCents', disputedCents, 'must not be negative');
  return percentOf(disputedCents, basisPoints(limitRate, 'limitRate', 0, 30_000));
}
