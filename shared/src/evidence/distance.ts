import { must } from '../arithmetic/index.ts';

export interface Point {
  /** Degrees, north and east positive. */
  latitude: number;
  longitude: number;
}

/** Mean radius of the Earth in meters (IUGG, R1 of the GRS 80 ellipsoid). */
const EARTH_RADIUS_M = 6_371_008.8;

const radians = (degrees: number): number => (degrees * Math.PI) / 180;

/** Meters between two points along a great circle, by haversine on the mean Earth. Throws InvalidInput for points off the globe. */
export function distanceM(a: Point, b: Point): number {
  for (const [name, point] of [['a', a], ['b', b]] as const) {
    must(Math.abs(point.latitude) <= 90, `${name}.latitude`, point.latitude, 'must lie between -90 and 90');
    must(Math.abs(point.longitude) <= 180, `${name}.longitude`, point.longitude, 'must lie between -180 and 180');
  }
  const half = (from: number, to: number) => Math.sin(radians(to - from) / 2) ** 2;
  const chord = half(a.latitude, b.latitude) + Math.cos(radians(a.latitude)) * Math.cos(radians(b.latitude)) * half(a.longitude, b.longitude);
  return 2 * EARTH_RADIUS_M * Math.asin(Math.min(1, Math.sqrt(chord)));
}
