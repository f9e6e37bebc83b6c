import { changes } from './changes.ts';
import { codes } from './codes.ts';
import { due } from './due.ts';
import type { Example } from './example.ts';
import { framing } from './framing.ts';
import { funding } from './funding.ts';
import { payments } from './payments.ts';
import { proof } from './proof.ts';
import { vouchers } from './vouchers.ts';

export const computed: readonly Example[] = [...due, ...vouchers, ...payments, ...changes, ...funding, ...proof, ...framing, ...codes];
