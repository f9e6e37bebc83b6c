import type { Cents } from '../money/index.ts';

export type MilestoneState = 'upcoming' | 'under_way' | 'claimed' | 'proven';

/** A milestone as the pole needs it; amounts in cents, changes included. */
export interface PoleMilestone {
  id: string;
  name: string;
  state: MilestoneState;
  scheduledCents: Cents;
  provenCents: Cents;
  billedCents: Cents;
  paidCents: Cents;
  changes: readonly PoleChange[];
}

export interface PoleChange {
  id: string;
  label: string;
  /** Agreed, or still waiting for somebody. */
  pending: boolean;
}

export interface PoleInput {
  /** In building order, from the ground up. */
  milestones: readonly PoleMilestone[];
  /** Lines that belong to the whole job, as one share at the top. */
  general: { scheduledCents: Cents; provenCents: Cents; billedCents: Cents; paidCents: Cents };
  /** How high the work should stand today; null before the start. */
  expectedTodayCents: Cents | null;
  /** False for people who may not see prices: amounts are shares of 10,000 then, and no caption names a sum. */
  prices: boolean;
}

export interface Band {
  id: string | null;
  name: string;
  /** From the top of the picture to the top of the band, and its height; in the picture's units. */
  top: number;
  height: number;
  provenHeight: number;
  billedHeight: number;
  paidHeight: number;
  /** Shown where there is room for it. */
  showsLabel: boolean;
  caption: string;
  notches: { id: string; label: string; pending: boolean; top: number }[];
}

export interface PolePicture {
  height: number;
  bands: Band[];
  /** Marks at each tenth of the contract sum, from the ground up. */
  graduations: { top: number; percent: number }[];
  pointerTop: number | null;
}

/** The same as text: a row per band. */
export interface PoleRow {
  name: string;
  scheduledCents: Cents;
  provenCents: Cents;
  billedCents: Cents;
  paidCents: Cents;
}
