import { z } from 'zod';
import { Id, Instant, Sha256, Text, list, ListQuery } from './common.ts';

/** The most bytes that a photo may have, and the most pixels: a phone of today makes up to 50 million. */
export const MOST_PHOTO_BYTES = 30_000_000;
export const MOST_PHOTO_PIXELS = 80_000_000;

export const photoStates = ['stored', 'ready', 'unreadable'] as const;
/** Sizes for display, by the longer side in pixels. */
export const photoSizes = { small: 360, medium: 1_080, large: 2_160 } as const;
export const PhotoSize = z.enum(['small', 'medium', 'large']);
export type PhotoSize = z.infer<typeof PhotoSize>;

/** The text fields of an upload beside the file. The id is made by the phone, so that a retry is the same photo. */
export const AddPhoto = z.strictObject({ id: Id, milestoneId: Id, note: Text(1_000, 0).default('') });

/** What was found out about a photo; each stands by itself and names its figures. */
export const PhotoFinding = z.object({ kind: z.enum(['place', 'time', 'reuse']), result: z.string(), sentence: z.string() });

export const Photo = z.object({
  id: Id,
  milestoneId: Id,
  fileId: Id,
  state: z.enum(photoStates),
  trouble: z.string().nullable(),
  note: z.string(),
  takenAt: Instant.nullable(),
  /** Null too for whoever may not know where it was taken. */
  place: z.object({ latitude: z.number(), longitude: z.number(), accuracyM: z.number().nullable() }).nullable(),
  width: z.int().nullable(),
  height: z.int().nullable(),
  /** Of the original, as it came. */
  bytes: z.int(),
  sha256: Sha256,
  findings: z.array(PhotoFinding),
  addedBy: z.object({ id: Id, name: z.string() }),
  addedAt: Instant,
});
export const PhotoList = list(Photo);
export const PhotoQuery = ListQuery.extend({ milestoneId: Id.optional() });

/** Where the site is, for comparing photos with it; the radius in meters. */
export const SiteLocation = z.strictObject({
  latitude: z.number().min(-90).max(90),
  longitude: z.number().min(-180).max(180),
  radiusM: z.int().min(10, 'At least 10 m.').max(5_000, 'At most 5,000 m.').default(75),
});
export const Site = z.object({ location: SiteLocation.nullable() });

export type AddPhoto = z.infer<typeof AddPhoto>;
export type PhotoFinding = z.infer<typeof PhotoFinding>;
export type Photo = z.infer<typeof Photo>;
export type PhotoList = z.infer<typeof PhotoList>;
export type PhotoQuery = z.infer<typeof PhotoQuery>;
export type SiteLocation = z.infer<typeof SiteLocation>;
export type Site = z.infer<typeof Site>;
