import { given, must, quantity, step, text, type Step } from '../arithmetic/index.ts';
import { dressedSizes, lumberSizes, type Inches, type LumberSize } from '../takeoff/index.ts';
import { REPETITIVE, designValues, gradeNames, sizeFactor, speciesNames, type Grade, type Species } from './design-values.ts';

export interface SpanInput {
  species: Species;
  grade: Grade;
  size: LumberSize;
  /** On center, inches, up to 24. */
  spacing: Inches;
  /** Pounds per square foot. */
  liveLoad: number;
  deadLoad: number;
  /** Deflection under live load at most span ÷ this. */
  deflectionLimit: number;
}

/** Nearer than this to half an inch, a span is a tie: binary arithmetic doesn't tell them apart. */
const TIE = 1e-6;

export const floorLoads = { liveLoad: 40, deadLoad: 10, deflectionLimit: 360 } as const;

export interface ScreenedSpan {
  /** Inches, before rounding. */
  bendingInches: number;
  deflectionInches: number;
  /** To the nearest inch, as tables print it; an exact half of an inch, which they print either way, goes down. */
  spanInches: number;
  /** Whether the span lies at exactly half an inch. */
  tie: boolean;
  governs: 'bending' | 'deflection';
  steps: Step;
}

/**
 * Clear span of a sawn joist: the lesser of √(8 F'b S ÷ w) under all load and ∛(384 E I ÷ (5 × limit × w live)), with F'b = Fb × size
 * factor × 1.15, to the nearest inch, an exact half down. A screen for the price, never a design. Throws InvalidInput.
 * Source: the residential code's method for its span tables; exact halves of an inch are printed either way.
 */
export function screenedSpan(input: SpanInput): ScreenedSpan {
  check(input);
  const { species, grade, size, deflectionLimit } = input;
  const [b, d] = [Number(dressedSizes[size].thickness), Number(dressedSizes[size].width)];
  const [sectionModulus, momentOfInertia] = [(b * d * d) / 6, (b * d * d * d) / 12];
  // pounds per inch of joist
  const along = (psf: number) => (psf * Number(input.spacing)) / 144;
  const { bending, elasticity } = designValues[species];
  const reference = bending[grade];
  const allowed = (typeof reference === 'number' ? reference * sizeFactor[size] : reference[size]) * REPETITIVE;
  const bendingInches = Math.sqrt((8 * allowed * sectionModulus) / along(input.liveLoad + input.deadLoad));
  const deflectionInches = Math.cbrt((384 * elasticity[grade] * momentOfInertia) / (5 * deflectionLimit * along(input.liveLoad)));
  const governs = bendingInches <= deflectionInches ? 'bending' : 'deflection';
  const exact = Math.min(bendingInches, deflectionInches);
  const tie = Math.abs(exact - Math.floor(exact) - 0.5) < TIE;
  const spanInches = tie ? Math.floor(exact) : Math.round(exact);
  const steps = step('Clear span of the screen', `the lesser of bending and deflection, ${tie ? 'an exact half of an inch, rounded down: tables print it either way' : 'to the nearest inch'}`, quantity(spanInches, 'in'), [
    step('By bending', '√(8 × bending × section modulus ÷ load)', quantity(bendingInches.toFixed(2), 'in'), [given('Bending, with its factors', quantity(Math.round(allowed), 'psi')), given('Section modulus', quantity(sectionModulus.toFixed(3), 'in³')), given('Load', quantity(input.liveLoad + input.deadLoad, 'psf'))]),
    step('By deflection', `∛(384 × stiffness ÷ (5 × ${deflectionLimit} × live load))`, quantity(deflectionInches.toFixed(2), 'in'), [given('Modulus of elasticity', quantity(elasticity[grade], 'psi')), given('Moment of inertia', quantity(momentOfInertia.toFixed(2), 'in⁴')), given('Live load', quantity(input.liveLoad, 'psf'))]),
    given('Joists', text(`${species} ${grade}, ${size}, ${input.spacing} in on center`)),
  ], exact.toFixed(2));
  return { bendingInches, deflectionInches, spanInches, tie, governs, steps };
}

function check({ species, grade, size, spacing, liveLoad, deadLoad, deflectionLimit }: SpanInput): void {
  must(speciesNames.includes(species), 'species', species, 'must be a species with tabulated values');
  must(gradeNames.includes(grade), 'grade', grade, 'must be a tabulated grade');
  must(lumberSizes.includes(size), 'size', size, 'must be a tabulated size');
  const apart = Number(spacing);
  must(/^\d{1,2}(\.\d{1,4})?$/.test(spacing) && apart > 0 && apart <= 24, 'spacing', spacing, 'must be more than 0 and at most 24 in');
  must(Number.isFinite(liveLoad) && liveLoad > 0 && liveLoad <= 500, 'liveLoad', liveLoad, 'must be more than 0 and at most 500 psf');
  must(Number.isFinite(deadLoad) && deadLoad >= 0 && deadLoad <= 500, 'deadLoad', deadLoad, 'must be from 0 to 500 psf');
  must(Number.isFinite(deflectionLimit) && deflectionLimit >= 120 && deflectionLimit <= 1_000, 'deflectionLimit', deflectionLimit, 'must be from 120 to 1,000');
}

/** What is not screened, whatever its span: manufactured and steel members, and loads that are not spread evenly. */
export type Member = { kind: 'sawn_joist'; input: SpanInput } | { kind: 'i_joist' | 'truss' | 'steel' | 'point_load' | 'cantilever' | 'other' };

export interface Screening {
  /** `silent` says nothing about whether it may be built: a screen can stop, it never clears. */
  verdict: 'beyond_the_screen' | 'silent' | 'not_screened';
  span: ScreenedSpan | null;
  /** What was compared, in words. */
  steps: Step;
  caution: string;
}

export const SPAN_CAUTION = 'Plans, the designer of record and the local code decide what may be built. This compares a span with one method and one table of lumber values, for the price alone.';

/** Compares a proposed clear span in inches with the screen. Throws InvalidInput. */
export function screenSpan(member: Member, clearSpanInches: number): Screening {
  must(Number.isFinite(clearSpanInches) && clearSpanInches > 0 && clearSpanInches <= 1_200, 'clearSpan', clearSpanInches, 'must be more than 0 and at most 100 ft');
  const proposed = given('Proposed clear span', quantity(clearSpanInches, 'in'));
  if (member.kind !== 'sawn_joist') return { verdict: 'not_screened', span: null, steps: step('Span screen', 'only sawn joists under loads spread evenly are screened', text('Not screened'), [proposed]), caution: SPAN_CAUTION };
  const span = screenedSpan(member.input);
  const beyond = clearSpanInches > span.spanInches;
  const steps = step('Span screen', 'a proposed clear span longer than the screen\'s own stops; any other clears nothing', text(beyond ? 'Beyond the screen' : 'Within the screen, which does not clear it'), [proposed, span.steps]);
  return { verdict: beyond ? 'beyond_the_screen' : 'silent', span, steps, caution: SPAN_CAUTION };
}
