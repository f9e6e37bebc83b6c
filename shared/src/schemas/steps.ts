import { z } from 'zod';
import type { Step as Tree } from '../arithmetic/index.ts';

const Node = z.object({ label: z.string(), rule: z.string(), result: z.looseObject({ kind: z.string() }), inputs: z.array(z.looseObject({})), exact: z.string().optional() }).meta({ id: 'Step' });
/**
 * A figure's arithmetic as it travels. The tree is as deep as the computation, which a JSON schema of one response need not repeat; its
 * type is the computation's own.
 */
export const Step = Node as unknown as z.ZodType<Tree>;
