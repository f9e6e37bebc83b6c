export { CheckboxField, DateField, MoneyField, NumberField, PercentField, SelectField, TextAreaField, TextField } from './fields.tsx';
export { PasswordField } from './password-field.tsx';
export { FieldGroup, FieldRow, Form } from './form.tsx';
export { useActForm } from './use-act-form.ts';
export { useNewId } from '../../lib/idempotency-key.ts';
export type { ActForm } from './use-act-form.ts';
