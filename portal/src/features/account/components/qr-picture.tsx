import { encode } from 'uqr';
import classes from './account.module.css';

/** Modules of rest around the picture, which readers need. */
const QUIET = 4;

/** A text as a picture that phones read; dark on light in both themes, since not every reader takes the opposite. */
export function QrPicture({ text, label }: { text: string; label: string }) {
  const { data, size } = encode(text, { ecc: 'M', border: QUIET });
  const path = data.flatMap((row, y) => row.map((dark, x) => (dark ? `M${x} ${y}h1v1h-1z` : ''))).join('');
  return (
    <svg className={classes['qr']} viewBox={`0 0 ${size} ${size}`} role="img" aria-label={label} shapeRendering="crispEdges">
      <rect width={size} height={size} fill="#fff" />
      <path d={path} fill="#000" />
    </svg>
  );
}
