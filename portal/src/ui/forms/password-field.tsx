import { Button, TextInput } from '@mantine/core';
import { useState, type ReactNode } from 'react';
import type { FieldProps } from './use-act-form.ts';

interface PasswordFieldProps {
  field: FieldProps;
  label: string;
  hint?: ReactNode;
  autoComplete: 'current-password' | 'new-password';
}

/** A password, hidden until somebody wants to see it; a password manager may fill it, and it may be pasted. */
export function PasswordField({ field, label, hint, autoComplete }: PasswordFieldProps) {
  const [shown, setShown] = useState(false);
  return (
    <TextInput
      {...field}
      label={label}
      description={hint}
      inputWrapperOrder={['label', 'description', 'error', 'input']}
      type={shown ? 'text' : 'password'}
      autoComplete={autoComplete}
      spellCheck={false}
      autoCapitalize="off"
      rightSectionWidth={84}
      rightSection={
        <Button variant="subtle" size="compact-md" aria-pressed={shown} aria-label={`Show: ${label}`} aria-controls={field.id} onClick={() => setShown(!shown)}>
          {shown ? 'Hide' : 'Show'}
        </Button>
      }
    />
  );
}
