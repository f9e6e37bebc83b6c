import { Injectable } from '@nestjs/common';
import type { Invite } from '@tallypole/shared/schemas/people';
import type { JobRole } from '@tallypole/shared/schemas/roles';
import type { Tx } from '../common/unit-of-work.ts';

export interface AcceptedInvitation {
  id: string;
  firm_id: string;
  job_id: string;
  role: JobRole;
  invited_by: string;
}

export interface InvitationFacts {
  firmId: string;
  firmName: string;
  jobName: string;
  inviterName: string;
  inviterEmail: string;
  timeZone: string;
}

export interface LockedInvitation {
  id: string;
  email: string;
  name: string;
  role: JobRole;
  acceptedAt: Date | null;
  revokedAt: Date | null;
}

@Injectable()
export class InvitationsRepository {
  async acceptInvitations(tx: Tx, now: Date): Promise<AcceptedInvitation[]> {
    return await tx.rows<AcceptedInvitation>('select * from app.accept_invitations($1)', [now]);
  }

  /** Into firms that invited this address. */
  async acceptFirmInvitations(tx: Tx, now: Date): Promise<void> {
    await tx.rows('select app.accept_firm_invitations($1)', [now]);
  }

  async acceptedFacts(tx: Tx, jobId: string): Promise<{ name: string; email: string; jobName: string }> {
    const row = await tx.one<{ name: string; email: string; jobName: string }>(
      'select coalesce(p.name, p.email) as name, p.email, j.name as "jobName" from person p, job j where p.id = app.actor() and j.id = $1',
      [jobId],
    );
    if (!row) throw new Error('The job of an accepted invitation is not visible.');
    return row;
  }

  async facts(tx: Tx, jobId: string): Promise<InvitationFacts | undefined> {
    return await tx.one<InvitationFacts>(
      `select j.firm_id as "firmId", f.name as "firmName", j.name as "jobName", coalesce(p.name, p.email) as "inviterName",
         p.email as "inviterEmail", j.time_zone as "timeZone"
       from job j join firm f on f.id = j.firm_id, person p where j.id = $1 and p.id = app.actor()`,
      [jobId],
    );
  }

  /** Inserts an invitation; false where the same address is already invited in this role and hasn't answered. */
  async invite(tx: Tx, jobId: string, firmId: string, invite: Invite, now: Date, expiresAt: Date): Promise<boolean> {
    const row = await tx.one(
      `insert into invitation (id, firm_id, job_id, email, name, role, invited_by, created_at, sent_at, expires_at)
       values ($1, $2, $3, $4, $5, $6, app.actor(), $7, $7, $8)
       on conflict (job_id, email, role) where accepted_at is null and revoked_at is null do nothing returning id`,
      [invite.id, firmId, jobId, invite.email, invite.name, invite.role, now, expiresAt],
    );
    return row !== undefined;
  }

  /** Locks the job, then the invitation. */
  async lock(tx: Tx, jobId: string, invitationId: string): Promise<LockedInvitation | undefined> {
    await tx.rows('select id from job where id = $1 for no key update', [jobId]);
    return await tx.one<LockedInvitation>(
      'select id, email, name, role, accepted_at as "acceptedAt", revoked_at as "revokedAt" from invitation where job_id = $1 and id = $2 for no key update',
      [jobId, invitationId],
    );
  }

  async renew(tx: Tx, invitationId: string, now: Date, expiresAt: Date): Promise<void> {
    await tx.rows('update invitation set sent_at = $2, expires_at = $3, invited_by = app.actor() where id = $1', [invitationId, now, expiresAt]);
  }

  async revoke(tx: Tx, invitationId: string, now: Date): Promise<void> {
    await tx.rows('update invitation set revoked_at = $2 where id = $1', [invitationId, now]);
  }
}
