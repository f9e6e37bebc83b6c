import { Button } from '@mantine/core';
import { useEffect, useRef, type ReactNode } from 'react';
import { SecondStepLink } from '../second-step-link.tsx';
import classes from './form.module.css';
import { fieldId, type ActForm } from './use-act-form.ts';

export interface FormProps<Values extends object> {
  act: ActForm<Values>;
  /** The button names the act: "Create job", "Sign for +$3,912.40". */
  submitLabel: string;
  children: ReactNode;
  /** Beside the button: a way back. */
  aside?: ReactNode;
  color?: 'ink' | 'oxide';
}

/** Fields, a summary of what is wrong that takes focus, and one button. */
export function Form<Values extends object>({ act, submitLabel, children, aside, color = 'ink' }: FormProps<Values>) {
  return (
    <form className={classes['form']} onSubmit={act.onSubmit} noValidate>
      <ErrorSummary act={act} />
      {children}
      <div style={{ display: 'flex', gap: 12, flexWrap: 'wrap', alignItems: 'center' }}>
        <Button type="submit" loading={act.submitting} color={color}>
          {submitLabel}
        </Button>
        {aside}
      </div>
    </form>
  );
}

const PREFIX = 'Error: ';

function ErrorSummary<Values extends object>({ act }: { act: ActForm<Values> }) {
  const box = useRef<HTMLDivElement>(null);
  const errors = Object.entries(act.form.errors);
  const shown = act.failures > 0 && (errors.length > 0 || act.failure !== null);
  useEffect(() => {
    if (!shown) return undefined;
    box.current?.focus();
    document.title = `${PREFIX}${document.title}`;
    return () => {
      document.title = document.title.replace(PREFIX, '');
    };
  }, [shown, act.failures]);
  if (!shown) return null;
  return (
    <div className={classes['summary']} ref={box} tabIndex={-1} role="alert">
      <h2>There is a problem</h2>
      {act.failure && errors.length === 0 ? <p>{act.failure.message}</p> : null}
      <SecondStepLink error={act.failure} />
      {act.failure?.code === 'outdated' ? (
        <Button variant="outline" onClick={() => window.location.reload()}>
          Load the page again
        </Button>
      ) : null}
      {errors.length > 0 ? (
        <ul>
          {errors.map(([path, message]) => (
            <li key={path}>
              <a
                href={`#${fieldId(act.name, path)}`}
                onClick={(event) => {
                  event.preventDefault();
                  document.getElementById(fieldId(act.name, path))?.focus();
                }}
              >
                {labelOf(fieldId(act.name, path))}
                {message}
              </a>
            </li>
          ))}
        </ul>
      ) : null}
    </div>
  );
}

/** "City: ", read from the page, since a message alone doesn't say which field it is about. */
function labelOf(id: string): string {
  const label = document.querySelector(`label[for="${id}"]`)?.textContent;
  return label ? `${label}: ` : '';
}

/** Fields that belong together under one heading. */
export const FieldGroup = ({ legend, children }: { legend: string; children: ReactNode }) => (
  <fieldset className={classes['group']}>
    <legend>{legend}</legend>
    {children}
  </fieldset>
);

/** Fields side by side where there is room. */
export const FieldRow = ({ children }: { children: ReactNode }) => <div className={classes['row']}>{children}</div>;
