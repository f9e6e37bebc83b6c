import type { KeyboardEvent } from 'react';

const TOWARDS: Readonly<Record<string, 1 | -1>> = { ArrowUp: 1, ArrowRight: 1, ArrowDown: -1, ArrowLeft: -1 };

/** Arrow keys go from band to band: up and right towards the roof. */
export function moveFocus(event: KeyboardEvent, container: HTMLElement | null): void {
  const by = TOWARDS[event.key];
  if (by === undefined || !container) return;
  const bands = [...container.querySelectorAll<HTMLElement>('a')];
  const at = bands.indexOf(document.activeElement as HTMLElement);
  if (at < 0) return;
  event.preventDefault();
  bands[Math.min(bands.length - 1, Math.max(0, at + by))]?.focus();
}
