import { useEffect } from 'react';

/** The page's title in the tab. */
export function useTitle(title: string): void {
  useEffect(() => {
    document.title = `${title} · Tallypole`;
  }, [title]);
}
