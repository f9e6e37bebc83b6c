import { z } from 'zod';
import { Id, Line, TimeZone } from './common.ts';

export const StartFirm = z.strictObject({ id: Id, name: Line(120, 2), timeZone: TimeZone });
export const Firm = z.object({ id: Id, name: z.string(), timeZone: z.string() });

export type StartFirm = z.infer<typeof StartFirm>;
export type Firm = z.infer<typeof Firm>;
