/**
 * Bad input to a computation: names the field (a path such as `lines.3.quantity`), the value as given and the rule it breaks,
 * so that a form can show the message at the right place.
 */
export class InvalidInput extends Error {
  override readonly name = 'InvalidInput';

  constructor(
    readonly field: string,
    readonly value: unknown,
    readonly rule: string,
  ) {
    super(`${field}: ${rule} (got ${describe(value)})`);
  }
}

/** Throws unless the rule holds. */
export function must(holds: boolean, field: string, value: unknown, rule: string): asserts holds {
  if (!holds) throw new InvalidInput(field, value, rule);
}

function describe(value: unknown): string {
  if (typeof value === 'string') return JSON.stringify(value.slice(0, 60));
  if (typeof value === 'number' || typeof value === 'boolean' || typeof value === 'bigint') return String(value);
  if (value === null || value === undefined) return String(value);
  return Array.isArray(value) ? `a list of ${value.length}` : 'an object';
}
