import type { PresenceAsked } from '@tallypole/shared/schemas/auth';
import { lazy, Suspense, useRef, useState, type ReactNode } from 'react';
import { post } from '../../lib/http.ts';
import { isProblemWith, Problem } from '../../lib/problem.ts';

export interface Presence {
  /** Performs an act; where the server asks who is there, a code is asked for and the act is sent again. */
  guard: <T>(act: () => Promise<T>) => Promise<T>;
  /** Stands somewhere on the page. */
  dialog: ReactNode;
}

interface Asked {
  by: PresenceAsked;
  settle: (present: boolean) => void;
}

const PresenceDialog = lazy(() => import('./presence-dialog.tsx'));

/** Proof of presence around signing, approving and paying: a code at the person's own address, or of their authenticator, asked for only when it is needed. */
export function usePresence(): Presence {
  const [asked, setAsked] = useState<Asked | null>(null);
  const open = useRef(false);
  const prove = async (): Promise<boolean> => {
    const by = await post<PresenceAsked>('auth/presence/codes', {});
    return await new Promise<boolean>((settle) => setAsked({ by, settle }));
  };
  const guard = async <T,>(act: () => Promise<T>): Promise<T> => {
    try {
      return await act();
    } catch (error) {
      if (!isProblemWith(error, 'presence_needed') || open.current) throw error;
      open.current = true;
      const present = await prove().finally(() => {
        open.current = false;
        setAsked(null);
      });
      if (!present) throw new Problem('presence_needed', 'You did not enter the code, so nothing was done. What you entered is kept.', 403);
      return await act();
    }
  };
  const dialog = asked ? (
    <Suspense fallback={null}>
      <PresenceDialog by={asked.by} onSettled={asked.settle} />
    </Suspense>
  ) : null;
  return { guard, dialog };
}
