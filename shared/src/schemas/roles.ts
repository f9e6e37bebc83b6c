import { z } from 'zod';

/** Roles within a building firm. */
export const firmRoles = ['principal', 'manager', 'site', 'books'] as const;
export const FirmRole = z.enum(firmRoles);
export type FirmRole = z.infer<typeof FirmRole>;

/** Roles on one job for people outside the firm. */
export const jobRoles = ['homeowner', 'lender', 'inspector', 'designer'] as const;
export const JobRole = z.enum(jobRoles);
export type JobRole = z.infer<typeof JobRole>;

export type Role = FirmRole | JobRole;
