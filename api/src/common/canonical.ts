import { canonicalText, type Json } from '@tallypole/shared/record';
import { createHash } from 'node:crypto';

export type { Json };

/** SHA-256, hex, of a value's canonical text (RFC 8785), which is what is hashed and stored. */
export const canonicalHash = (value: Json): string => createHash('sha256').update(canonicalText(value)).digest('hex');
