import { must } from '../arithmetic/index.ts';
import { dayNumber } from '../due/index.ts';
import { distanceM, type Point } from './distance.ts';

/** What was found out about one photo. It stands by itself: findings are listed with their figures, never blended into one score. */
export interface Finding {
  kind: 'place' | 'time' | 'reuse';
  /** place: on_site, off_site; time: inside, before, after; reuse: new, alike; each: unknown, which is neutral. */
  result: 'on_site' | 'off_site' | 'inside' | 'before' | 'after' | 'new' | 'alike' | 'unknown';
  sentence: string;
}

/** A fix that is less sure than this says nothing. */
const WORST_ACCURACY_M = 100;
/** So many of 64 bits may differ between two pictures that are taken for one (a judgement, no source). */
export const MOST_BITS_ALIKE = 6;

const meters = (distance: number): string => (distance < 1_000 ? `${Math.round(distance)} m` : `${(distance / 1_000).toFixed(1)} km`);
const written = (date: string): string => new Intl.DateTimeFormat('en-US', { timeZone: 'UTC', year: 'numeric', month: 'long', day: 'numeric' }).format(new Date(`${date}T00:00:00Z`));

/** Whether a photo was taken on the site: within its radius plus what the fix itself is unsure of. Distances in meters. Throws InvalidInput. */
export function placeFinding(photo: (Point & { accuracyM: number | null }) | null, site: (Point & { radiusM: number }) | null): Finding {
  const unknown = (sentence: string): Finding => ({ kind: 'place', result: 'unknown', sentence });
  if (!photo) return unknown('The picture does not say where it was taken.');
  if (!site) return unknown('The place of the site has not been entered.');
  const accuracy = photo.accuracyM ?? 0;
  // not a number would pass every comparison below as "off site"
  must(accuracy >= 0, 'photo.accuracyM', photo.accuracyM, 'must be a number of meters');
  must(site.radiusM >= 0 && Number.isFinite(site.radiusM), 'site.radiusM', site.radiusM, 'must be a number of meters');
  if (accuracy > WORST_ACCURACY_M) return unknown(`The phone was sure of its place only within ${meters(accuracy)}.`);
  const distance = distanceM(photo, site);
  const reach = site.radiusM + accuracy;
  const fix = photo.accuracyM === null ? '' : ` (the phone was sure within ${meters(accuracy)})`;
  return {
    kind: 'place',
    result: distance <= reach ? 'on_site' : 'off_site',
    sentence: `Taken ${meters(distance)} from the site${fix}; within ${meters(site.radiusM)} counts as on site.`,
  };
}

export interface Period {
  /** The day on which the photo was taken, work began and it was claimed as done, YYYY-MM-DD in the job's time zone. */
  takenOn: string | null;
  beganOn: string | null;
  claimedOn: string | null;
}

/** Whether a photo was taken while its milestone was built. Throws InvalidInput for a day that doesn't exist. */
export function timeFinding({ takenOn, beganOn, claimedOn }: Period): Finding {
  const finding = (result: Finding['result'], sentence: string): Finding => ({ kind: 'time', result, sentence });
  for (const [name, on] of Object.entries({ takenOn, beganOn, claimedOn })) if (on !== null) dayNumber(on, name);
  if (takenOn === null) return finding('unknown', 'The picture does not say when it was taken.');
  if (beganOn !== null && takenOn < beganOn) return finding('before', `Taken ${written(takenOn)}, before work on it began on ${written(beganOn)}.`);
  if (claimedOn !== null && takenOn > claimedOn) return finding('after', `Taken ${written(takenOn)}, after it was claimed on ${written(claimedOn)}.`);
  if (beganOn === null) return finding('unknown', `Taken ${written(takenOn)}; when work on it began was not recorded.`);
  return finding('inside', `Taken ${written(takenOn)}, while it was built (since ${written(beganOn)}${claimedOn === null ? '' : ` until ${written(claimedOn)}`}).`);
}

/** The most alike photo that was added before, for another milestone; where it belongs to another job, nothing of that is named. */
export interface Earlier {
  bits: number;
  sameJob: { milestone: string; addedOn: string } | null;
}

/** Whether a photo looks like one that was shown for something else. `comparable` is false for a picture without any shapes. Throws InvalidInput. */
export function reuseFinding(earlier: Earlier | null, comparable = true): Finding {
  must(earlier === null || (Number.isSafeInteger(earlier.bits) && earlier.bits >= 0 && earlier.bits <= 64), 'bits', earlier?.bits, 'must be a whole number from 0 to 64');
  if (!comparable) return { kind: 'reuse', result: 'unknown', sentence: 'The picture shows too little to be compared with others.' };
  if (!earlier || earlier.bits > MOST_BITS_ALIKE) return { kind: 'reuse', result: 'new', sentence: 'It looks like no photo that was added before for something else.' };
  const where = earlier.sameJob ? `for ${earlier.sameJob.milestone} on ${written(earlier.sameJob.addedOn)}` : 'elsewhere';
  return { kind: 'reuse', result: 'alike', sentence: `It looks like a photo that was added before ${where} (${earlier.bits} of 64 bits of the pictures' hashes differ).` };
}
