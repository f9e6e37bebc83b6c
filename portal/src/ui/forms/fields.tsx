import { ActionIcon, Checkbox, NativeSelect, Textarea, TextInput } from '@mantine/core';
import { formatMoney, formatRate, parseMoney, parseRate } from '@tallypole/shared/money';
import { lazy, Suspense, useRef, useState, type ReactNode } from 'react';
import { readDate, writtenDate } from '../../lib/dates.ts';
import { Popup } from '../popup.tsx';
import classes from './form.module.css';
import type { FieldProps } from './use-act-form.ts';

interface Common {
  field: FieldProps;
  label: string;
  hint?: ReactNode;
  autoFocus?: boolean;
}

type TextFieldProps = Common & { autoComplete?: string; inputMode?: 'text' | 'email' | 'numeric' | 'decimal'; type?: 'text' | 'email'; spellCheck?: boolean; maxLength?: number };

/** One line of text. */
export const TextField = ({ field, label, hint, ...rest }: TextFieldProps) => <TextInput {...field} {...rest} label={label} description={hint} inputWrapperOrder={ORDER} />;

/** Several lines. */
export const TextAreaField = ({ field, label, hint, rows = 4 }: Common & { rows?: number }) => (
  <Textarea {...field} label={label} description={hint} inputWrapperOrder={ORDER} rows={rows} autosize={false} />
);

export const SelectField = ({ field, label, hint, options }: Common & { options: readonly { value: string; label: string }[] }) => (
  <NativeSelect {...field} label={label} description={hint} inputWrapperOrder={ORDER} data={[...options]} />
);

export const CheckboxField = ({ field, label, hint }: Common) => {
  const { value, onChange, ...rest } = field as unknown as { id: string; value: boolean; onChange: (checked: boolean) => void; error: ReactNode };
  return <Checkbox {...rest} checked={value} onChange={(event) => onChange(event.currentTarget.checked)} label={label} description={hint} size="md" />;
};

const ORDER = ['label', 'description', 'error', 'input'] as ('label' | 'description' | 'error' | 'input')[];

interface TypedProps extends Common {
  /** The value as text, and back; null where the text can't be read. */
  read: (typed: string) => number | string | null;
  write: (value: number | string) => string;
  /** How it was read, for people. */
  shown: (value: number | string) => string;
  inputMode: 'text' | 'decimal';
  section?: string;
  /** Another way to enter the value, at the right end of the field. */
  picker?: (value: string | null, choose: (text: string) => void) => ReactNode;
}

/** Takes what people type, keeps it, and says below how it was read. The form holds the value, or the text where it can't be read. */
function TypedField({ field, label, hint, read, write, shown, inputMode, section, autoFocus, picker }: TypedProps) {
  const given = field.value as unknown as number | string | null;
  const [typed, setTyped] = useState(() => (typeof given === 'number' || (given !== null && read(given) === given) ? write(given) : (given ?? '')));
  const understood = typed.trim() === '' ? null : read(typed);
  const enter = (text: string) => {
    setTyped(text);
    const value = text.trim() === '' ? null : read(text);
    field.onChange(value ?? text);
  };
  return (
    <div>
      <TextInput
        id={field.id}
        error={field.error}
        label={label}
        description={hint}
        inputWrapperOrder={ORDER}
        inputMode={inputMode}
        autoComplete="off"
        value={typed}
        data-autofocus={autoFocus}
        leftSection={section}
        rightSection={picker?.(typeof understood === 'string' ? understood : null, enter)}
        rightSectionWidth={picker ? 44 : undefined}
        onChange={(event) => enter(event.currentTarget.value)}
      />
      <div className={classes['read']} aria-live="polite">
        {understood === null ? '' : shown(understood)}
      </div>
    </div>
  );
}

const orNull = <T,>(work: () => T): T | null => {
  try {
    return work();
  } catch {
    return null;
  }
};

/** A sum: "12,400", "12400.5", "$1,234.56"; the form holds cents. */
export const MoneyField = (props: Common) => (
  <TypedField
    {...props}
    inputMode="decimal"
    section="$"
    read={(typed) => orNull(() => parseMoney(typed))}
    write={(value) => formatMoney(Number(value)).replace('$', '')}
    shown={(value) => formatMoney(Number(value))}
  />
);

/** A percentage: "7.25"; the form holds basis points. */
export const PercentField = (props: Common) => (
  <TypedField
    {...props}
    inputMode="decimal"
    section="%"
    read={(typed) => orNull(() => parseRate(typed))}
    write={(value) => formatRate(Number(value)).replace(' %', '')}
    shown={(value) => formatRate(Number(value))}
  />
);

/** A date: "3/14", "March 14, 2027", "2027-03-14"; the form holds YYYY-MM-DD. */
export const DateField = ({ near, ...props }: Common & { near: string }) => (
  <TypedField
    {...props}
    inputMode="text"
    read={(typed) => readDate(typed, near)}
    write={(value) => writtenDate(String(value))}
    shown={(value) => writtenDate(String(value), true)}
    picker={(value, choose) => <CalendarButton label={props.label} value={value} near={near} onChange={(date) => choose(writtenDate(date))} />}
  />
);

const Calendar = lazy(() => import('./calendar.tsx'));

/** For a near day it is quicker to choose than to type. */
function CalendarButton({ label, value, near, onChange }: { label: string; value: string | null; near: string; onChange: (date: string) => void }) {
  const [opened, setOpened] = useState(false);
  const opener = useRef<HTMLButtonElement>(null);
  const button = (
    <ActionIcon ref={opener} variant="subtle" size={40} aria-label={`Choose from a calendar: ${label}`} aria-haspopup="dialog" aria-expanded={opened} onClick={() => setOpened(!opened)}>
      <svg width="18" height="18" viewBox="0 0 18 18" fill="none" stroke="currentColor" strokeWidth="1.5" aria-hidden="true">
        <path d="M2.5 4.5h13v11h-13zM2.5 7.5h13M6 2v4M12 2v4" />
      </svg>
    </ActionIcon>
  );
  const choose = (date: string) => {
    onChange(date);
    setOpened(false);
    opener.current?.focus();
  };
  return (
    <Popup label={label} button={button} opened={opened} onClose={() => setOpened(false)}>
      <Suspense fallback="…">
        <Calendar value={value} near={near} onChange={choose} />
      </Suspense>
    </Popup>
  );
}

/** A whole number of days or pieces. */
export const NumberField = (props: Common) => (
  <TypedField {...props} inputMode="decimal" read={(typed) => (/^-?\d{1,9}$/.test(typed.trim()) ? Number(typed.trim()) : null)} write={String} shown={() => ''} />
);
