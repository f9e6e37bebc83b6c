import { schemaResolver, useForm, type UseFormReturnType } from '@mantine/form';
import { useCallback, useEffect, useRef, useState } from 'react';
import type { z } from 'zod';
import { dropDraft, keepDraft, readDraft } from '../../lib/drafts.ts';
import { useIdempotencyKey } from '../../lib/idempotency-key.ts';
import { Problem } from '../../lib/problem.ts';

export interface ActFormOptions<Values extends object, Answer> {
  /** Names form and record: what was typed and the idempotency key are kept under it. */
  name: string;
  initialValues: Values;
  /** Without one, the server's word at each field is waited for: a first page loads no schemas. */
  schema?: z.ZodType;
  /** Sends it; the same key for every try of this form. */
  send: (values: Values, idempotencyKey: string) => Promise<Answer>;
  onDone: (answer: Answer) => void;
  /** Not kept when it is sensitive: a code, a password. */
  keep?: boolean;
}

export interface ActForm<Values extends object> {
  name: string;
  form: UseFormReturnType<Values>;
  submitting: boolean;
  /** What the server said that belongs to no field. */
  failure: Problem | null;
  /** Counts failed tries, so that the summary takes focus on each. */
  failures: number;
  onSubmit: (event?: React.FormEvent<HTMLFormElement>) => void;
  /** Everything that a field of this path needs. */
  field: (path: string) => FieldProps;
}

export interface FieldProps {
  id: string;
  value: never;
  onChange: (value: unknown) => void;
  error: React.ReactNode;
}

/** A form that performs one act: checked on sending, once an error is shown on each change; what was typed survives; sent once. */
export function useActForm<Values extends object, Answer>(options: ActFormOptions<Values, Answer>): ActForm<Values> {
  const { name, initialValues, schema, send, onDone, keep = true } = options;
  if (schema) mustKnow(schema, initialValues);
  const idempotency = useIdempotencyKey(name);
  const [submitting, setSubmitting] = useState(false);
  const [failure, setFailure] = useState<Problem | null>(null);
  const [failures, setFailures] = useState(0);
  const busy = useRef(false);
  const form = useForm<Values>({
    initialValues: { ...initialValues, ...(keep ? readDraft<Values>(name) : null) },
    ...(schema ? { validate: schemaResolver(schema as never, { sync: true }) } : {}),
    validateInputOnChange: failures > 0,
  });
  const { values } = form;
  const latest = useRef(values);
  // what was sent is not kept again by the renders that follow
  const sent = useRef<Values | null>(null);
  useEffect(() => {
    latest.current = values;
    if (keep && values !== sent.current && form.isDirty()) keepDraft(name, values);
  }, [keep, name, values, form]);

  const failed = useCallback((problem: Problem | null) => {
    setFailure(problem);
    setFailures((count) => count + 1);
  }, []);

  const perform = async (typed: Values) => {
    if (busy.current) return;
    busy.current = true;
    setSubmitting(true);
    try {
      const answer = await send(typed, idempotency.key);
      idempotency.spend();
      sent.current = latest.current;
      dropDraft(name);
      setFailure(null);
      onDone(answer);
    } catch (error) {
      const problem = error instanceof Problem ? error : new Problem('failed', 'Sorry, something went wrong on our side. Nothing was changed.', 500);
      // a refused act left no trace; a corrected form is another act under the same key only if the first was never stored
      if (problem.errors.length > 0) form.setErrors(Object.fromEntries(problem.errors.map((e) => [pathOf(e.pointer), e.message])));
      if (problem.code === 'key_reused') idempotency.renew();
      failed(problem);
    } finally {
      busy.current = false;
      setSubmitting(false);
    }
  };

  return {
    name,
    form,
    submitting,
    failure,
    failures,
    onSubmit: (event) => form.onSubmit((typed) => void perform(typed), () => failed(null))(event),
    field: (path) => ({ ...(form.getInputProps(path) as Omit<FieldProps, 'id'>), id: fieldId(name, path) }),
  };
}

/** A field that a strict schema doesn't know could never be sent, and nobody could say why at any field. */
function mustKnow(schema: z.ZodType, values: object): void {
  const shape = (schema as { shape?: object }).shape;
  const unknown = shape && Object.keys(values).find((key) => !(key in shape));
  if (unknown) throw new Error(`The schema of this form does not know its field "${unknown}".`);
}

const pathOf = (pointer: string): string => pointer.replace(/^\//, '').replaceAll('/', '.');
export const fieldId = (form: string, path: string): string => `${form}-${path}`.replace(/[^A-Za-z0-9_-]/g, '-');
