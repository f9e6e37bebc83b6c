export { CheckboxField, DateField, MoneyField, NumberField, PercentField, SelectField, TextAreaField, TextField } from './fields.tsx';
export { FieldGroup, FieldRow, Form } from './form.tsx';
export { useActForm, useNewId } from './use-act-form.ts';
export type { ActForm, FieldProps } from './use-act-form.ts';
