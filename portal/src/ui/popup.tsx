import { lazy, Suspense, useRef, type ReactNode } from 'react';
import classes from './popup.module.css';

export interface PopupProps {
  /** What it is about, for a screen reader, and on a phone its title. */
  label: string;
  /** The button that opens it; it says so itself by aria-expanded. */
  button: ReactNode;
  opened: boolean;
  onClose: () => void;
  width?: number;
  children: ReactNode;
}

// placing something beside a button takes more code than most first pages need
const PopupWindow = lazy(() => import('./popup-window.tsx'));

/** Something that opens beside its button, on a phone from below; Escape and a click elsewhere close it, and focus goes back. */
export function Popup({ label, button, opened, onClose, width, children }: PopupProps) {
  const place = useRef<HTMLSpanElement>(null);
  const close = () => {
    onClose();
    place.current?.querySelector('button')?.focus();
  };
  return (
    <span className={classes['place']} ref={place}>
      {button}
      {opened ? (
        <Suspense fallback={null}>
          <PopupWindow label={label} place={place} width={width} onClose={close} onLeave={onClose}>
            {children}
          </PopupWindow>
        </Suspense>
      ) : null}
    </span>
  );
}
