import { Injectable } from '@nestjs/common';
import type { GuestLink, InspectorFor, SenderSide } from '@tallypole/shared/schemas/guest-links';
import type { MilestoneState } from '@tallypole/shared/schemas/milestones';
import type { Tx } from '../common/unit-of-work.ts';

export interface NewGuestLink {
  firmId: string;
  jobId: string;
  id: string;
  name: string;
  email: string;
  note: string;
  salt: Buffer;
  guestId: string;
  side: SenderSide;
  days: number;
  onBehalf: InspectorFor;
  milestoneIds: readonly string[];
  now: Date;
  expiresAt: Date;
}

export interface LockedLink {
  firmId: string;
  senderSide: SenderSide;
  days: number;
  revokedAt: Date | null;
}

export interface SendingFacts {
  firmId: string;
  milestones: { id: string; state: MilestoneState }[];
  /** Whether the address is one of the firm's own people. */
  isMember: boolean;
}

@Injectable()
export class GuestLinksRepository {
  async facts(tx: Tx, jobId: string, milestoneIds: readonly string[], email: string): Promise<SendingFacts> {
    const row = await tx.one<SendingFacts>(
      `select j.firm_id as "firmId",
         (select coalesce(json_agg(json_build_object('id', m.id, 'state', m.state)), '[]') from milestone m where m.job_id = j.id and m.id = any($2::uuid[])) as milestones,
         app.is_of_firm(j.id, $3) as "isMember"
       from job j where j.id = $1`,
      [jobId, milestoneIds, email],
    );
    if (!row) throw new Error('A job whose roles are known must be visible.');
    return row;
  }

  /** Somebody who can be named as having acted, and can do nothing without the link. */
  async addGuest(tx: Tx, id: string, name: string, now: Date): Promise<void> {
    await tx.rows('select app.new_guest($1, $2, $3)', [id, name, now]);
  }

  async add(tx: Tx, link: NewGuestLink): Promise<void> {
    const { firmId, jobId, id, name, email, note, salt, guestId, side, days, onBehalf, milestoneIds, now, expiresAt } = link;
    await tx.rows(
      `insert into guest_link (firm_id, job_id, id, kind, name, email, salt, note, person_id, sent_by, sender_side, days, created_at, sent_at, expires_at)
       values ($1, $2, $3, 'inspector', $4, $5, $6, $7, $8, app.actor(), $9, $10, $11, $11, $12)`,
      [firmId, jobId, id, name, email, salt, note, guestId, side, days, now, expiresAt],
    );
    await tx.rows('insert into guest_link_inspector (firm_id, job_id, link_id, on_behalf) values ($1, $2, $3, $4)', [firmId, jobId, id, onBehalf]);
    await tx.rows('insert into guest_link_milestone (firm_id, job_id, link_id, milestone_id) select $1, $2, $3, unnest($4::uuid[])', [firmId, jobId, id, milestoneIds]);
  }

  /** Locks the job, then the link. */
  async lock(tx: Tx, jobId: string, linkId: string): Promise<LockedLink | undefined> {
    await tx.rows('select id from job where id = $1 for no key update', [jobId]);
    return await tx.one<LockedLink>(
      `select firm_id as "firmId", sender_side as "senderSide", days, revoked_at as "revokedAt" from guest_link where job_id = $1 and id = $2 for no key update`,
      [jobId, linkId],
    );
  }

  async unproven(tx: Tx, linkId: string): Promise<number> {
    const row = await tx.one<{ n: number }>(`select count(*)::int as n from guest_link_milestone g join milestone m on m.id = g.milestone_id where g.link_id = $1 and m.state <> 'proven'`, [linkId]);
    return row?.n ?? 0;
  }

  async renew(tx: Tx, linkId: string, now: Date, expiresAt: Date): Promise<void> {
    await tx.rows(`update guest_link_milestone g set answered_at = null from milestone m where g.link_id = $1 and m.id = g.milestone_id and m.state <> 'proven'`, [linkId]);
    await tx.rows(
      `update guest_link set token_hash = null, mailed_at = null, done_at = null, revoked_at = null, revoked_by = null, sent_at = $2, expires_at = $3 where id = $1`,
      [linkId, now, expiresAt],
    );
  }

  async revoke(tx: Tx, linkId: string, now: Date): Promise<void> {
    await tx.rows('update guest_link set token_hash = null, revoked_at = $2, revoked_by = app.actor() where id = $1', [linkId, now]);
  }

  async list(tx: Tx, jobId: string, now: Date): Promise<Omit<GuestLink, 'counts' | 'mine'>[]> {
    const rows = await tx.rows<{ link: Omit<GuestLink, 'counts' | 'mine'> }>(LINKS, [jobId, now]);
    return rows.map(({ link }) => link);
  }
}

const instant = (column: string) => `to_char(${column} at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;

const LINKS = /* sql */ `
  select json_build_object('id', l.id, 'name', l.name, 'email', case when l.sent_by = app.actor() then l.email else app.masked(l.email) end,
    'onBehalf', b.on_behalf, 'senderSide', l.sender_side, 'sentBy', json_build_object('id', s.id, 'name', coalesce(s.name, s.email)),
    'state', case when l.revoked_at is not null then 'revoked' when l.done_at is not null then 'done' when l.expires_at <= $2 then 'expired'
      when l.mailed_at is null then 'on_its_way' when l.opened_at is not null then 'opened' else 'sent' end,
    'milestones', (select json_agg(json_build_object('id', m.id, 'name', m.name, 'answeredAt', ${instant('g.answered_at')}) order by m.position)
      from guest_link_milestone g join milestone m on m.id = g.milestone_id where g.link_id = l.id),
    'sentAt', ${instant('l.sent_at')}, 'openedAt', ${instant('l.opened_at')}, 'expiresAt', ${instant('l.expires_at')}) as link
  from guest_link l join guest_link_inspector b on b.link_id = l.id join person s on s.id = l.sent_by
  where l.job_id = $1 order by l.created_at desc limit 200`;
