const PARTS = { year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit', hourCycle: 'h23' } as const;

/** A wall-clock time (YYYY-MM-DDTHH:MM:SS) in a time zone as an instant. In the hour that a clock repeats, the earlier one. */
export function instantIn(timeZone: string, wall: string): Date {
  const asUtc = Date.parse(`${wall}Z`);
  const first = asUtc - offsetAt(timeZone, asUtc);
  // the offset at the first guess may be the one of the other side of a clock change
  return new Date(asUtc - offsetAt(timeZone, first));
}

function offsetAt(timeZone: string, instant: number): number {
  const parts = Object.fromEntries(new Intl.DateTimeFormat('en-US', { timeZone, ...PARTS }).formatToParts(instant).map(({ type, value }) => [type, value]));
  const wall = Date.UTC(Number(parts['year']), Number(parts['month']) - 1, Number(parts['day']), Number(parts['hour']), Number(parts['minute']), Number(parts['second']));
  return wall - Math.floor(instant / 1000) * 1000;
}
