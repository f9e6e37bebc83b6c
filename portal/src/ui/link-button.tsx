import { Button, type ButtonVariant } from '@mantine/core';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';

/** A link that looks like a button: it goes somewhere, it doesn't act. */
export const LinkButton = ({ to, children, variant = 'filled', fullWidth = false }: { to: string; children: ReactNode; variant?: ButtonVariant; fullWidth?: boolean }) => (
  <Button component={Link} to={to} variant={variant} fullWidth={fullWidth}>
    {children}
  </Button>
);
