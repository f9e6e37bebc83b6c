import type { LumberSize } from '../takeoff/index.ts';

export const speciesNames = ['Douglas fir-larch', 'Hem-fir', 'Southern pine', 'Spruce-pine-fir'] as const;
export type Species = (typeof speciesNames)[number];
export const gradeNames = ['SS', '#1', '#2', '#3'] as const;
export type Grade = (typeof gradeNames)[number];

/** Bending Fb in psi, by grade or by grade and size, and modulus of elasticity E in psi. */
interface Values {
  bending: Record<Grade, number> | Record<Grade, Record<LumberSize, number>>;
  elasticity: Record<Grade, number>;
}

const bySize = (...values: [number, number, number, number, number]): Record<LumberSize, number> => ({ '2x4': values[0], '2x6': values[1], '2x8': values[2], '2x10': values[3], '2x12': values[4] });

/**
 * Reference design values of visually graded dimension lumber, 2 in thick. Source: National Design Specification for Wood Construction,
 * Supplement 2015/2018, tables 4A and 4B, from memory; they reproduce the residential code's printed spans (see the tests).
 */
export const designValues: Record<Species, Values> = {
  'Douglas fir-larch': { bending: { SS: 1_500, '#1': 1_000, '#2': 900, '#3': 525 }, elasticity: { SS: 1_900_000, '#1': 1_700_000, '#2': 1_600_000, '#3': 1_400_000 } },
  'Hem-fir': { bending: { SS: 1_400, '#1': 975, '#2': 850, '#3': 500 }, elasticity: { SS: 1_600_000, '#1': 1_500_000, '#2': 1_300_000, '#3': 1_200_000 } },
  'Spruce-pine-fir': { bending: { SS: 1_250, '#1': 875, '#2': 875, '#3': 500 }, elasticity: { SS: 1_500_000, '#1': 1_400_000, '#2': 1_400_000, '#3': 1_200_000 } },
  'Southern pine': {
    bending: { SS: bySize(2_350, 2_100, 1_950, 1_700, 1_600), '#1': bySize(1_500, 1_350, 1_250, 1_050, 1_000), '#2': bySize(1_100, 1_000, 925, 800, 750), '#3': bySize(650, 575, 525, 475, 450) },
    elasticity: { SS: 1_800_000, '#1': 1_600_000, '#2': 1_400_000, '#3': 1_300_000 },
  },
};

/** Size factor on bending, for species whose values are not by size already; same source. */
export const sizeFactor: Record<LumberSize, number> = { '2x4': 1.5, '2x6': 1.3, '2x8': 1.2, '2x10': 1.1, '2x12': 1 };

/** For three or more members not more than 24 in on center; same source. */
export const REPETITIVE = 1.15;
