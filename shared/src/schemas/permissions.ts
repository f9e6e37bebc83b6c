import type { Role } from './roles.ts';

const firm = ['principal', 'manager', 'site', 'books'] as const;
const office = ['principal', 'manager', 'books'] as const;

/**
 * Who may do what, by role; the state of the record is checked by the act itself. Refused by default: what isn't listed can't be done.
 * The portal reads the same table to offer only what will be allowed.
 */
export const permissions = {
  'firm.read': firm,
  'firm.invite': ['principal'],
  'firm.members': ['principal'],
  'firm.settings': ['principal'],
  'firm.pricing': ['principal', 'manager'],
  'job.create': ['principal', 'manager'],
  'job.read': [...firm, 'homeowner', 'lender', 'inspector', 'designer'],
  'people.read': [...firm, 'homeowner', 'lender'],
  'people.invite': ['principal', 'manager'],
  'people.remove': ['principal', 'manager'],
  'record.read': [...office, 'homeowner', 'lender'],
  'money.read': [...office, 'homeowner', 'lender'],
  'schedule_of_values.import': ['principal', 'manager', 'books'],
  'schedule_of_values.read': [...office, 'homeowner', 'lender'],
  'milestone.read': [...firm, 'homeowner', 'lender', 'inspector', 'designer'],
  'milestone.plan': ['principal', 'manager'],
  'milestone.claim': ['principal', 'manager', 'site'],
  'milestone.prove': ['homeowner', 'lender', 'inspector'],
  'milestone.reopen': ['principal', 'manager', 'homeowner', 'lender', 'inspector'],
  'guest_link.read': [...office, 'homeowner', 'lender'],
  'guest_link.send': ['principal', 'manager', 'homeowner', 'lender'],
  'photo.add': ['principal', 'manager', 'site', 'inspector', 'lender'],
  'photo.read': [...firm, 'homeowner', 'lender', 'inspector', 'designer'],
  // where a photo was taken, and its original
  'photo.place': [...firm, 'homeowner', 'lender'],
  'site.locate': ['principal', 'manager'],
  'file.add': [...firm, 'lender', 'designer'],
  'file.read': [...firm, 'homeowner', 'lender', 'inspector', 'designer'],
  'change.read': [...firm, 'homeowner', 'lender', 'designer'],
  'change.price': ['principal', 'manager'],
  'change.issue': ['principal', 'manager'],
  'change.review': ['principal', 'manager', 'designer'],
  'change.decide': ['homeowner'],
  'document.read': [...office, 'homeowner', 'lender'],
  'draw.read': [...office, 'homeowner', 'lender'],
  'draw.prepare': ['principal', 'manager', 'books'],
  'draw.approve': ['homeowner'],
  'draw.fund': ['lender'],
  'payment.start': ['homeowner'],
  'payment.record': ['principal', 'books'],
  'payout.setup': ['principal'],
  'loan.terms': ['principal', 'manager', 'lender'],
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof permissions;

/** Whether somebody with these roles may do this, before the record's state is asked. */
export const may = (roles: readonly Role[], permission: Permission): boolean =>
  roles.some((role) => (permissions[permission] as readonly Role[]).includes(role));
