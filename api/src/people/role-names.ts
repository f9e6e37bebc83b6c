import type { JobRole } from '@tallypole/shared/schemas/roles';

/** How a role is called in a mail, and what it will be for. */
export const roleNames: Readonly<Record<JobRole, { name: string; task: string }>> = {
  homeowner: { name: 'homeowner', task: 'There you see how the house stands, decide on changes, and approve and pay each draw.' },
  lender: { name: 'lender', task: 'There you see the proof behind each draw and record what you fund.' },
  inspector: { name: 'inspector', task: 'There you record what you saw on site.' },
  designer: { name: 'designer', task: 'There you review structural changes before the homeowner is asked.' },
};
