import { notifications } from '@mantine/notifications';

/** Says that something was done. */
export const toast = (message: string): void => {
  notifications.show({ message, autoClose: 6000, withCloseButton: true, closeButtonProps: { 'aria-label': 'Close' } });
};
