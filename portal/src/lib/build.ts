import { useSyncExternalStore } from 'react';

/** The build that this page was loaded from; none while developing. */
const mine = document.querySelector<HTMLMetaElement>('meta[name="build-id"]')?.content ?? null;
const listeners = new Set<() => void>();
let newer = false;

/** Each answer names the server's build; another one than the page's means that the page is outdated. */
export function noteBuild(ofServer: string | null, ofPage: string | null = mine): void {
  const differs = ofServer !== null && ofPage !== null && ofServer !== ofPage;
  if (ofServer === null || differs === newer) return;
  newer = differs;
  for (const listener of listeners) listener();
}

export const isOutdated = (): boolean => newer;

const subscribe = (listener: () => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

/** True once a newer build answered: the page asks to be loaded again before an act. */
export const useOutdated = (): boolean => useSyncExternalStore(subscribe, isOutdated);
