import { v7 } from 'uuid';
import type { ImportSchedule } from '@tallypole/shared/schemas/schedule-of-values';

/** Phase → lines with their sums in dollars; a phase named General has no milestone. */
type Phases = Readonly<Record<string, readonly (readonly [description: string, dollars: number, kind?: 'allowance' | 'contingency'])[]>>;

/** 486,500.00 */
export const juniperPhases: Phases = {
  'Site and foundation': [['Layout and excavation', 14_200], ['Footings', 18_650], ['Foundation walls', 23_400], ['Dampproofing, drains, backfill', 12_750]],
  'Floor frame': [['Sill plates and anchors', 5_240], ['Girder and posts', 8_310], ['Joists and rim', 16_980], ['Subfloor', 9_470]],
  'Walls and roof': [['Wall framing', 28_600], ['Roof trusses', 23_900], ['Sheathing and housewrap', 19_500]],
  'Dry-in': [['Roofing', 21_800], ['Windows and doors', 26_250], ['Siding and trim', 19_950]],
  'Rough-in': [['Plumbing', 18_400], ['Electrical', 19_850], ['Heating and ventilation', 21_750]],
  'Insulation and drywall': [['Insulation', 13_600], ['Drywall', 20_400]],
  Finishes: [['Cabinets', 21_500, 'allowance'], ['Counters', 11_200, 'allowance'], ['Flooring', 14_900], ['Painting', 14_700], ['Light fixtures', 7_200, 'allowance']],
  Completion: [['Trim-out of the trades', 12_500], ['Driveway and walks', 9_800], ['Final grading and cleaning', 4_700]],
  General: [['Permits and fees', 6_500], ['Supervision', 22_000], ['Temporary power and dumpsters', 9_000], ['Contingency', 9_500, 'contingency']],
};

/** 212,400.00 */
export const tanagerPhases: Phases = {
  Foundation: [['Footings and walls', 38_400]],
  Frame: [['Floor, walls and roof', 74_000]],
  'Close and finish': [['Dry-in and rough-in', 52_000], ['Finishes', 41_000]],
  General: [['Supervision', 7_000]],
};

/** What the import page would send, with a milestone for each phase and dates that the caller spreads. */
export function scheduleOf(phases: Phases, plannedOn: (i: number) => string): { schedule: ImportSchedule; milestoneId: ReadonlyMap<string, string> } {
  const names = Object.keys(phases).filter((phase) => phase !== 'General');
  const milestoneId = new Map(names.map((name) => [name, v7()]));
  let number = 0;
  const lines = Object.entries(phases).flatMap(([phase, rows]) =>
    rows.map(([description, dollars, kind]) => {
      number += 1;
      return { id: v7(), number: String(number), phase, description, scheduledCents: Number(`${dollars}00`), kind: kind ?? ('base' as const), milestoneId: milestoneId.get(phase) ?? null };
    }),
  );
  return { schedule: { milestones: names.map((name, i) => ({ id: milestoneId.get(name) ?? '', name, plannedOn: plannedOn(i) })), lines }, milestoneId };
}
