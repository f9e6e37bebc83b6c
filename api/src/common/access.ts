import { may, type Permission } from '@tallypole/shared/schemas/permissions';
import type { Role } from '@tallypole/shared/schemas/roles';
import { Problem } from './problem.ts';
import type { Tx } from './unit-of-work.ts';

/** Refuses unless one of the roles has the permission: "not found" to whoever has no role there, "not allowed" to the others. */
export function requireRole(roles: readonly Role[], permission: Permission): void {
  if (roles.length === 0) throw new Problem('not_found');
  if (!may(roles, permission)) throw new Problem('not_allowed');
}

/** The first line of every act on a job: what the actor is there, and whether that is enough. Returns the roles. */
export async function requireOnJob(tx: Tx, permission: Permission, jobId: string): Promise<Role[]> {
  const row = await tx.one<{ roles: Role[] }>('select app.my_roles($1) as roles', [jobId]);
  const roles = row?.roles ?? [];
  requireRole(roles, permission);
  return roles;
}

/** The same for an act of the firm itself. */
export async function requireInFirm(tx: Tx, permission: Permission, firmId: string): Promise<Role[]> {
  const rows = await tx.rows<{ role: Role }>('select role from firm_member where firm_id = $1 and person_id = app.actor()', [firmId]);
  const roles = rows.map(({ role }) => role);
  requireRole(roles, permission);
  return roles;
}
