const SIDE = 32;
const KEPT = 8;
/** Width and height of the grayscale picture that is hashed. */
export const HASH_SIDE = SIDE;

const COSINES = Array.from({ length: KEPT }, (_, u) => Array.from({ length: SIDE }, (_unused, x) => Math.cos(((2 * x + 1) * u * Math.PI) / (2 * SIDE))));

/**
 * 64 bits, as 16 hex digits, that stay nearly the same when a picture is scaled, compressed or slightly brightened: the signs of its
 * lowest spatial frequencies against their median (a common method; the bits are compared by how many differ).
 */
export function perceptualHash(gray: Uint8Array): string {
  if (gray.length !== SIDE * SIDE) throw new RangeError(`A picture of ${SIDE} × ${SIDE} is expected.`);
  const rows = Array.from({ length: SIDE }, (_, y) => COSINES.map((cosine) => cosine.reduce((total, weight, x) => total + weight * (gray[y * SIDE + x] ?? 0), 0)));
  const frequencies = COSINES.flatMap((cosine) => Array.from({ length: KEPT }, (_, u) => cosine.reduce((total, weight, y) => total + weight * (rows[y]?.[u] ?? 0), 0)));
  // the first is the mean brightness, which says nothing about what is seen
  const shapes = frequencies.slice(1);
  const median = [...shapes].sort((a, b) => a - b)[Math.floor(shapes.length / 2)] ?? 0;
  const bits = frequencies.map((frequency, i) => (i > 0 && frequency > median ? '1' : '0')).join('');
  return BigInt(`0b${bits}`).toString(16).padStart(16, '0');
}
