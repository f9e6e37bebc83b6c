import { formatMoney } from '@tallypole/shared/money';
import { polePicture, poleRows, type Band, type PoleInput } from '@tallypole/shared/pole';
import { useId, useRef, useState, type MouseEvent } from 'react';
import { Link } from 'react-router-dom';
import { BandFacts } from './band-facts.tsx';
import { moveFocus } from './move-focus.ts';
import { PoleStrip } from './pole-strip.tsx';
import classes from './pole.module.css';

const HEIGHT = 620;
const ROD = 46;
const LEFT = 34;
const EDGE = 8;

export interface PoleProps {
  input: PoleInput;
  /** Where a band leads; general lines have no milestone. */
  bandHref: (milestoneId: string | null) => string;
}

/** The story pole: a rod beside the page on a desk, a strip along the top on a phone. Hover, tap or arrow keys open a band, Enter goes there. */
export function Pole({ input, bandHref, strip = false }: PoleProps & { strip?: boolean }) {
  if (input.milestones.length === 0 && input.general.scheduledCents === 0) return <p className="quiet">The pole stands here once the schedule of values is in.</p>;
  return (
    <nav aria-label="Milestones from the ground up">
      {strip ? <PoleStrip input={input} bandHref={bandHref} /> : <Rod input={input} bandHref={bandHref} />}
      <p className={classes['key']} aria-hidden="true">
        <span><i><b className={`${classes['fill'] ?? ''} ${classes['proven'] ?? ''}`} style={{ width: '100%' }} /></i>proven</span>
        {input.prices ? <span><i><b className={`${classes['fill'] ?? ''} ${classes['billed'] ?? ''}`} style={{ width: '100%' }} /></i>billed</span> : null}
        {input.prices ? <span><i><b className={classes['fill']} style={{ width: '100%', background: 'var(--treated)' }} /></i>paid</span> : null}
      </p>
      <PoleTable input={input} />
    </nav>
  );
}

function Rod({ input, bandHref }: PoleProps) {
  const picture = polePicture(input, HEIGHT);
  const rows = poleRows(input);
  const rod = useRef<HTMLDivElement>(null);
  const pattern = useId();
  const [tapped, setTapped] = useState<number | null>(null);
  // a finger has no hover: the first tap opens the band, the second goes there
  const onClick = (event: MouseEvent, band: number) => {
    if ((event.nativeEvent as PointerEvent).pointerType !== 'touch' || tapped === band) return;
    event.preventDefault();
    setTapped(band);
  };
  return (
    <div className={classes['rod']} ref={rod} style={{ height: HEIGHT + 2 }} onKeyDown={(event) => moveFocus(event, rod.current)}>
      <svg width={LEFT + ROD} height={HEIGHT + 2} viewBox={`0 -1 ${LEFT + ROD} ${HEIGHT + 2}`} aria-hidden="true">
        <defs>
          <pattern id={pattern} width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
            <line x1="0" y1="0" x2="0" y2="6" stroke="var(--ink)" strokeWidth="1.6" />
          </pattern>
        </defs>
        {picture.graduations.map(({ top, percent }) => (
          <g key={percent}>
            <line x1={LEFT - (percent % 50 === 0 ? 12 : 6)} x2={LEFT} y1={top} y2={top} stroke="var(--pencil)" />
            {percent % 50 === 0 ? (
              <text x={LEFT - 15} y={Math.min(HEIGHT - 2, Math.max(10, top + 4))} textAnchor="end" fontSize="11" fill="var(--pencil)">
                {percent}
              </text>
            ) : null}
          </g>
        ))}
        {picture.bands.map((band, i) => (
          <BandShape key={band.id ?? `general-${i}`} band={band} pattern={pattern} />
        ))}
        {picture.pointerTop === null ? null : <path d={`M${LEFT - 1} ${picture.pointerTop} l-9 -5 v10 z`} fill="var(--graphite)" />}
      </svg>
      {picture.bands.map((band, i) => (
        <div key={band.id ?? `general-${i}`} className={classes['place']} style={{ top: band.top, height: Math.max(band.height, 2) }}>
          <Link
            to={bandHref(band.id)}
            className={`${classes['band'] ?? ''} ${band.provenHeight > 0 && band.provenHeight < band.height ? (classes['now'] ?? '') : ''}`}
            aria-label={`${band.name}: ${band.caption}`}
            data-open={tapped === i || undefined}
            onClick={(event) => onClick(event, i)}
          >
            {band.showsLabel ? (
              <span className={classes['label']}>
                {`${band.name} `}
                <span>{band.caption}</span>
              </span>
            ) : null}
          </Link>
          <div className={classes['card']} aria-hidden="true">
            <BandFacts band={band} row={rows[i]} prices={input.prices} />
          </div>
        </div>
      ))}
    </div>
  );
}

function BandShape({ band, pattern }: { band: Band; pattern: string }) {
  const bottom = band.top + band.height;
  return (
    <g>
      <rect x={LEFT} y={band.top} width={ROD} height={band.height} fill="var(--sheet)" />
      <rect x={LEFT} y={bottom - band.provenHeight} width={ROD} height={band.provenHeight} fill="var(--ink)" opacity="0.26" />
      <rect x={LEFT} y={bottom - band.billedHeight} width={ROD} height={band.billedHeight} fill={`url(#${pattern})`} />
      <rect x={LEFT + ROD - EDGE} y={bottom - band.paidHeight} width={EDGE} height={band.paidHeight} fill="var(--treated)" />
      {band.notches.map((notch) => (
        <path key={notch.id} d={`M${LEFT + ROD} ${notch.top} l-11 -6 v12 z`} fill={notch.pending ? 'var(--sawdust)' : 'var(--graphite)'} />
      ))}
      <rect x={LEFT} y={band.top} width={ROD} height={band.height} fill="none" stroke="var(--graphite)" />
    </g>
  );
}

function PoleTable({ input }: { input: PoleInput }) {
  if (!input.prices) return null;
  return (
    <div className="visually-hidden">
      <table>
        <caption>The pole as a table</caption>
        <thead>
          <tr>
            {['Milestone', 'Scheduled', 'Proven', 'Billed', 'Paid'].map((head) => (
              <th key={head} scope="col">
                {head}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {poleRows(input).map((row, i) => (
            <tr key={i}>
              <th scope="row">{row.name}</th>
              <td>{formatMoney(row.scheduledCents)}</td>
              <td>{formatMoney(row.provenCents)}</td>
              <td>{formatMoney(row.billedCents)}</td>
              <td>{formatMoney(row.paidCents)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
