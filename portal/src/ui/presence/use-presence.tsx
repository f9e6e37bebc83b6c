import { Modal } from '@mantine/core';
import { ProvePresence } from '@tallypole/shared/schemas/auth';
import type { CodeSent } from '@tallypole/shared/schemas/auth';
import { useRef, useState, type ReactNode } from 'react';
import { post } from '../../lib/http.ts';
import { isProblemWith, Problem } from '../../lib/problem.ts';
import { Form, TextField, useActForm } from '../forms/index.ts';

export interface Presence {
  /** Performs an act; where the server asks who is there, a mailed code is asked for and the act is sent again. */
  guard: <T>(act: () => Promise<T>) => Promise<T>;
  /** Stands somewhere on the page. */
  dialog: ReactNode;
}

interface Asked {
  sentTo: string;
  settle: (present: boolean) => void;
}

/** Proof of presence around signing, approving and paying: a code at the person's own address, asked for only when it is needed. */
export function usePresence(): Presence {
  const [asked, setAsked] = useState<Asked | null>(null);
  const open = useRef(false);
  const prove = async (): Promise<boolean> => {
    const { sentTo } = await post<CodeSent>('auth/presence/codes', {});
    return await new Promise<boolean>((settle) => setAsked({ sentTo, settle }));
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
    <Modal opened onClose={() => asked.settle(false)} title="Confirm that it is you" closeButtonProps={{ 'aria-label': 'Close' }} centered>
      <CodeForm sentTo={asked.sentTo} onDone={() => asked.settle(true)} />
    </Modal>
  ) : null;
  return { guard, dialog };
}

function CodeForm({ sentTo, onDone }: { sentTo: string; onDone: () => void }) {
  const act = useActForm({
    name: 'presence',
    initialValues: { code: '' },
    schema: ProvePresence,
    keep: false,
    send: ({ code }) => post<undefined>('auth/presence', { code: code.replace(/\s/g, '') }),
    onDone,
  });
  return (
    <Form act={act} submitLabel="Confirm and go on">
      <p>We mailed a code to {sentTo}. It is good for 10 minutes.</p>
      <TextField field={act.field('code')} label="Code from the mail" inputMode="numeric" autoComplete="one-time-code" spellCheck={false} autoFocus />
    </Form>
  );
}
