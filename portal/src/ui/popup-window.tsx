import { Drawer, Popover } from '@mantine/core';
import { useMediaQuery } from '@mantine/hooks';
import { useEffect, useRef, type ReactNode, type RefObject } from 'react';
import classes from './popup.module.css';

interface PopupWindowProps {
  label: string;
  place: RefObject<HTMLElement | null>;
  width: number | undefined;
  onClose: () => void;
  /** A click elsewhere: focus stays where the click put it. */
  onLeave: () => void;
  children: ReactNode;
}

const PopupWindow = ({ label, place, width, onClose, onLeave, children }: PopupWindowProps) => {
  const phone = useMediaQuery('(max-width: 47.99em)', undefined, { getInitialValueInEffect: false });
  if (phone) {
    return (
      <Drawer.Root opened onClose={onClose} position="bottom" size="auto" transitionProps={{ duration: 0 }}>
        <Drawer.Overlay />
        <Drawer.Content>
          {/* the drawer's own head would be a second banner of the page */}
          <div className={classes['head']}>
            <Drawer.Title>{label}</Drawer.Title>
            <Drawer.CloseButton aria-label="Close" size="lg" />
          </div>
          <Drawer.Body>{children}</Drawer.Body>
        </Drawer.Content>
      </Drawer.Root>
    );
  }
  return (
    <Beside label={label} place={place} width={width} onClose={onClose} onLeave={onLeave}>
      {children}
    </Beside>
  );
};
export default PopupWindow;

function Beside({ label, place, width, onClose, onLeave, children }: PopupWindowProps) {
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const leave = ({ target }: PointerEvent) => {
      if (target instanceof Node && !box.current?.contains(target) && !place.current?.contains(target)) onLeave();
    };
    document.addEventListener('pointerdown', leave);
    return () => document.removeEventListener('pointerdown', leave);
  }, [place, onLeave]);
  return (
    <Popover opened onDismiss={onClose} width={width} position="bottom-end" shadow="md" trapFocus closeOnClickOutside={false} withRoles={false} transitionProps={{ duration: 0 }}>
      <Popover.Target>
        <span className={classes['over']} />
      </Popover.Target>
      <Popover.Dropdown ref={box} role="dialog" aria-label={label} style={{ maxHeight: '60vh', overflow: 'auto' }} tabIndex={0}>
        {children}
      </Popover.Dropdown>
    </Popover>
  );
}
