import { Injectable } from '@nestjs/common';
import type { GuestVisit, InspectorFor, SenderSide } from '@tallypole/shared/schemas/guest-links';
import type { MilestoneState } from '@tallypole/shared/schemas/milestones';
import type { Guest, Tx } from '../common/unit-of-work.ts';
import type { StoredSize } from '../photos/photos.repository.ts';

export interface OpenedLink {
  firmName: string;
  sentTo: string;
  expiresAt: Date;
}

export interface MilestoneOfLink {
  jobName: string;
  timeZone: string;
  jobCreatedBy: string;
  name: string;
  state: MilestoneState;
  percent: number;
  claimedBy: string | null;
  version: number;
  answeredAt: Date | null;
  onBehalf: InspectorFor;
  senderSide: SenderSide;
  salt: Buffer;
  email: string;
}

export interface GuestInspection {
  id: string;
  milestoneId: string;
  result: string;
  percent: number;
  note: string;
  seenOn: string;
  independent: boolean;
  name: string;
  company: string;
  license: string;
  /** Where the milestone goes; null where it stays as it is. */
  state: MilestoneState | null;
}

export interface GuestPhoto {
  id: string;
  milestoneId: string;
  name: string;
  mediaType: string;
  bytes: number;
  sha256: string;
  storageKey: string;
  note: string;
}

/** A guest reaches nothing by themselves: each of these is one definer function, which asks for the link. */
@Injectable()
export class GuestRepository {
  async open(tx: Tx, token: Buffer, sessionId: string, visit: Buffer, now: Date): Promise<OpenedLink | undefined> {
    return await tx.one<OpenedLink>(`select firm_name as "firmName", sent_to as "sentTo", expires_at as "expiresAt" from app.open_guest_link($1, $2, $3, $4)`, [token, sessionId, visit, now]);
  }

  async askForCode(tx: Tx, guest: Guest, codeId: string, now: Date): Promise<void> {
    await tx.rows('select app.ask_for_guest_code($1, $2, $3)', [guest.sessionId, codeId, now]);
  }

  async confirm(tx: Tx, guest: Guest, code: Buffer, visit: Buffer, now: Date): Promise<{ outcome: string; first: boolean }> {
    const row = await tx.one<{ outcome: string; first: boolean }>('select outcome, first from app.confirm_guest($1, $2, $3, $4)', [guest.sessionId, code, visit, now]);
    return row ?? { outcome: 'expired', first: false };
  }

  async leave(tx: Tx, guest: Guest, now: Date): Promise<void> {
    await tx.rows('select app.end_guest_session($1, $2)', [guest.sessionId, now]);
  }

  async visit(tx: Tx): Promise<Omit<GuestVisit, 'counts' | 'today'> | undefined> {
    return (await tx.one<{ visit: Omit<GuestVisit, 'counts' | 'today'> | null }>('select app.guest_inspector_visit() as visit'))?.visit ?? undefined;
  }

  async size(tx: Tx, photoId: string, size: string): Promise<StoredSize | undefined> {
    const row = await tx.one<{ sizes: StoredSize[] | null }>('select app.guest_photo_sizes($1) as sizes', [photoId]);
    return row?.sizes?.find((stored) => stored.size === size);
  }

  async addPhoto(tx: Tx, photo: GuestPhoto, now: Date): Promise<boolean> {
    const { id, milestoneId, name, mediaType, bytes, sha256, storageKey, note } = photo;
    const row = await tx.one<{ added: boolean }>('select app.add_guest_photo($1, $2, $3, $4, $5, $6, $7, $8, $9) as added', [id, milestoneId, name, mediaType, bytes, sha256, storageKey, note, now]);
    return row?.added ?? false;
  }

  async lock(tx: Tx, milestoneId: string): Promise<MilestoneOfLink | undefined> {
    return await tx.one<MilestoneOfLink>(
      `select job_name as "jobName", time_zone as "timeZone", job_created_by as "jobCreatedBy", name, state, percent, claimed_by as "claimedBy", version,
         answered_at as "answeredAt", on_behalf as "onBehalf", sender_side as "senderSide", salt, email from app.lock_guest_milestone($1)`,
      [milestoneId],
    );
  }

  async inspect(tx: Tx, inspection: GuestInspection, now: Date): Promise<void> {
    const { id, milestoneId, result, percent, note, seenOn, independent, name, company, license, state } = inspection;
    await tx.rows('select app.record_guest_inspection($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)', [
      id, milestoneId, result, percent, note, seenOn, independent, name, company, license, state, now,
    ]);
  }

  /** The guest's own entry in what the whole job sees. */
  async record(tx: Tx, text: string): Promise<void> {
    await tx.rows('select app.append_guest_record($1)', [text]);
  }
}
