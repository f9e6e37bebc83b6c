import { CloseButton } from '@mantine/core';
import { polePicture, poleRows, type Band } from '@tallypole/shared/pole';
import { useRef, useState } from 'react';
import { Link } from 'react-router-dom';
import { BandFacts } from './band-facts.tsx';
import { moveFocus } from './move-focus.ts';
import type { PoleProps } from './pole.tsx';
import classes from './pole.module.css';

const LENGTH = 100;
const share = (part: number, whole: number) => (whole > 0 ? `${(part / whole) * 100}%` : '0');
const fill = (kind: string) => `${classes['fill'] ?? ''} ${classes[kind] ?? ''}`;

/**
 * The pole laid down along the top of a phone, ground at the left. A tap or the arrow keys open a band below it, a second tap or Enter
 * goes there; a band too thin for a finger is reached from its neighbor.
 */
export function PoleStrip({ input, bandHref }: PoleProps) {
  const { bands, pointerTop } = polePicture(input, LENGTH);
  const [open, setOpen] = useState<number | null>(null);
  const strip = useRef<HTMLDivElement>(null);
  const shown = open === null ? undefined : bands[open];
  return (
    <>
      <div className={classes['lying']}>
        {pointerTop === null ? null : <span className={classes['today']} style={{ left: `${LENGTH - pointerTop}%` }} />}
        <div className={classes['strip']} ref={strip} onKeyDown={(event) => moveFocus(event, strip.current)}>
          {bands.map((band, i) => (
            <Link
              key={band.id ?? `general-${i}`}
              to={bandHref(band.id)}
              className={classes['part']}
              style={{ flex: `${band.height} 1 0` }}
              aria-label={`${band.name}: ${band.caption}`}
              data-open={i === open || undefined}
              onFocus={({ currentTarget }) => {
                if (currentTarget.matches(':focus-visible')) setOpen(i);
              }}
              onClick={(event) => {
                if (i !== open) event.preventDefault();
                setOpen(i === open ? null : i);
              }}
            >
              <span className={fill('proven')} style={{ width: share(band.provenHeight, band.height) }} />
              <span className={fill('billed')} style={{ width: share(band.billedHeight, band.height) }} />
              <span className={fill('paid')} style={{ width: share(band.paidHeight, band.height) }} />
              {band.notches.map((notch) => (
                <span key={notch.id} className={classes['notch']} data-pending={notch.pending || undefined} style={{ left: share(band.top + band.height - notch.top, band.height) }} />
              ))}
            </Link>
          ))}
        </div>
      </div>
      {shown && open !== null ? (
        <div className={classes['panel']}>
          <div className={classes['panelHead']}>
            <div>
              <BandFacts band={shown} row={poleRows(input)[open]} prices={input.prices} />
            </div>
            <CloseButton size={44} aria-label="Close" onClick={() => setOpen(null)} />
          </div>
          <div className={classes['moves']}>
            <Neighbor band={bands[open - 1]} direction="Below" onOpen={() => setOpen(open - 1)} />
            <Link to={bandHref(shown.id)} onClick={() => setOpen(null)}>
              {shown.id === null ? 'Go to the schedule' : 'Go there'}
            </Link>
            <Neighbor band={bands[open + 1]} direction="Above" onOpen={() => setOpen(open + 1)} />
          </div>
        </div>
      ) : null}
    </>
  );
}

function Neighbor({ band, direction, onOpen }: { band: Band | undefined; direction: 'Below' | 'Above'; onOpen: () => void }) {
  if (!band) return <span />;
  return (
    <button type="button" onClick={onOpen} aria-label={`${direction}: ${band.name}`}>
      {direction}
    </button>
  );
}
