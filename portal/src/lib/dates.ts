/** A business date (YYYY-MM-DD, no zone) as people write it: "March 3, 2027", with its weekday where something is due. */
export function writtenDate(date: string, weekday = false): string {
  return new Intl.DateTimeFormat('en-US', { timeZone: 'UTC', year: 'numeric', month: 'long', day: 'numeric', ...(weekday ? { weekday: 'long' } : {}) }).format(new Date(`${date}T00:00:00Z`));
}

/** An instant in the job's time zone: "March 3, 2027, 4:05 PM". */
export function writtenInstant(instant: string, timeZone: string): string {
  return new Intl.DateTimeFormat('en-US', { timeZone, year: 'numeric', month: 'long', day: 'numeric', hour: 'numeric', minute: '2-digit' }).format(new Date(instant));
}

const pad = (n: number) => String(n).padStart(2, '0');

/** Reads a date as people type it: "3/14", "3/14/27", "March 14, 2027", "2027-03-14"; without a year, the one of `near`'s closest such day. Null if it isn't one. */
export function readDate(typed: string, near: string): string | null {
  const text = typed.trim();
  const iso = /^(\d{4})-(\d{1,2})-(\d{1,2})$/.exec(text);
  if (iso) return real(Number(iso[1]), Number(iso[2]), Number(iso[3]));
  const slashed = /^(\d{1,2})\/(\d{1,2})(?:\/(\d{2}|\d{4}))?$/.exec(text);
  if (slashed) return withYear(Number(slashed[1]), Number(slashed[2]), slashed[3], near);
  const words = /^([A-Za-z]{3,9})\.? (\d{1,2})(?:,? (\d{2}|\d{4}))?$/.exec(text);
  const month = words ? MONTHS.findIndex((name) => name.startsWith((words[1] ?? '').toLowerCase())) + 1 : 0;
  return words && month > 0 ? withYear(month, Number(words[2]), words[3], near) : null;
}

const MONTHS = ['january', 'february', 'march', 'april', 'may', 'june', 'july', 'august', 'september', 'october', 'november', 'december'];

function withYear(month: number, day: number, year: string | undefined, near: string): string | null {
  if (year !== undefined) return real(year.length === 2 ? 2000 + Number(year) : Number(year), month, day);
  const around = Number(near.slice(0, 4));
  const candidates = [around - 1, around, around + 1].map((candidate) => real(candidate, month, day)).filter((date) => date !== null);
  const distance = (date: string) => Math.abs(Date.parse(date) - Date.parse(near));
  return candidates.sort((a, b) => distance(a) - distance(b))[0] ?? null;
}

function real(year: number, month: number, day: number): string | null {
  const date = `${year}-${pad(month)}-${pad(day)}`;
  const parsed = new Date(`${date}T00:00:00Z`);
  return !Number.isNaN(parsed.getTime()) && parsed.toISOString().startsWith(date) ? date : null;
}

/** Today's business date in a time zone. */
export const todayIn = (timeZone: string): string => new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).format(new Date());

/** "2027-03" as "March 2027". */
export const writtenMonth = (month: string): string => new Intl.DateTimeFormat('en-US', { timeZone: 'UTC', year: 'numeric', month: 'long' }).format(new Date(`${month}-01T00:00:00Z`));
