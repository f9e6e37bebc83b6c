import { useSyncExternalStore } from 'react';

const listeners = new Set<() => void>();
let said = false;

/** Says that something was done. */
export function toast(message: string): void {
  void import('@mantine/notifications').then(({ notifications }) => {
    notifications.show({ message, autoClose: 6000, withCloseButton: true, closeButtonProps: { 'aria-label': 'Close' } });
    said = true;
    for (const listener of listeners) listener();
  });
}

const subscribe = (listener: () => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

/** Whether anything was said yet: the place for it is loaded only then. */
export const useSaid = (): boolean => useSyncExternalStore(subscribe, () => said);
