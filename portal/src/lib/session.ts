const LOCK = 'tally-refresh';
const RENEWED = 'tally-renewed-at';

const listeners = new Set<() => void>();

/**
 * Renews the session for all tabs at once: they wait for each other, and whoever was refused before another one renewed uses its
 * cookies. `askedAt` is when the refused request was sent; `refresh` tells whether the server renewed. False when nobody is signed in
 * any more. A tab in another process may hear late of the renewal and renew once more, which the server allows for a minute.
 */
export async function renewSession(askedAt: number, refresh: () => Promise<boolean>): Promise<boolean> {
  const renew = async () => {
    if (renewedAt() > askedAt) return true;
    const renewed = await refresh();
    if (renewed) localStorage.setItem(RENEWED, String(Date.now()));
    return renewed;
  };
  return 'locks' in navigator ? await navigator.locks.request(LOCK, renew) : await renew();
}

const renewedAt = (): number => Number(localStorage.getItem(RENEWED) ?? 0);

/** Calls back when the server no longer knows who this is; returns the way to stop. */
export function onSessionEnd(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

export function sessionEnded(): void {
  for (const listener of listeners) listener();
}
