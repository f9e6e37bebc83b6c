import { Modal } from '@mantine/core';
import { useRef, useState, type ReactNode } from 'react';
import { isProblemWith, Problem } from '../../../lib/problem.ts';
import { askForCode } from '../api/guest.ts';
import { strings } from '../strings.ts';
import { CodeForm } from './code-form.tsx';

interface Asked {
  sentTo: string;
  settle: (entered: boolean) => void;
}

/** Performs an act; where its code is too old, another one is mailed and asked for, and the act is sent again. */
export function useFreshCode(): { guard: <T>(act: () => Promise<T>) => Promise<T>; dialog: ReactNode } {
  const [asked, setAsked] = useState<Asked | null>(null);
  const open = useRef(false);
  const guard = async <T,>(act: () => Promise<T>): Promise<T> => {
    try {
      return await act();
    } catch (error) {
      if (!isProblemWith(error, 'presence_needed') || open.current) throw error;
      open.current = true;
      const entered = await enterCode(setAsked).finally(() => {
        open.current = false;
        setAsked(null);
      });
      if (!entered) throw new Problem('presence_needed', strings.notConfirmed, 403);
      return await act();
    }
  };
  const dialog = asked ? (
    <Modal opened onClose={() => asked.settle(false)} title={strings.confirmTitle} closeButtonProps={{ 'aria-label': 'Close' }} centered>
      <p style={{ marginBottom: 16 }}>
        {strings.confirmExplain} <strong>{asked.sentTo}</strong>.
      </p>
      <CodeForm submitLabel={strings.confirmGo} onDone={() => asked.settle(true)} />
    </Modal>
  ) : null;
  return { guard, dialog };
}

async function enterCode(show: (asked: Asked) => void): Promise<boolean> {
  const { sentTo } = await askForCode();
  return await new Promise<boolean>((settle) => show({ sentTo, settle }));
}
