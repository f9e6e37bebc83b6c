import { Inject, Injectable } from '@nestjs/common';
import { v7 } from 'uuid';
import type { CodeSent } from '@tallypole/shared/schemas/auth';
import { countsAsProof, type GuestDoor, type GuestVisit } from '@tallypole/shared/schemas/guest-links';
import { codeHash } from '../auth/tokens.ts';
import { Clock } from '../common/clock.ts';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import { Problem } from '../common/problem.ts';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { UnitOfWork, type Guest, type Tx } from '../common/unit-of-work.ts';
import type { StoredSize } from '../photos/photos.repository.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { GuestRepository, type OpenedLink } from './guest.repository.ts';
import { codeSubject, newToken, tokenHash } from './guest-tokens.ts';

const CODE_MINUTES = 10;
/** Codes that one link may ask for. */
const CODES_PER_LINK = { hits: 6, seconds: 900 };

export interface Entered {
  door: GuestDoor;
  /** The visit's new token, for its cookie. */
  token: string;
}

/** The way in for whoever came by a link: the link opens a visit, a mailed code opens what it is for. */
@Injectable()
export class GuestService {
  constructor(
    private readonly work: UnitOfWork,
    private readonly repository: GuestRepository,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly limits: RateLimitGuard,
    private readonly clock: Clock,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  /** One answer to every link that is not good, whether it is unknown, expired, used up or revoked. */
  async open(linkToken: string): Promise<Entered> {
    const token = newToken();
    const link = await this.work.write(undefined, (tx) => this.repository.open(tx, tokenHash(linkToken), v7(), tokenHash(token), this.clock.now()));
    if (!link) throw new Problem('link_over');
    return { door: doorOf(link, false), token };
  }

  door(visit: Buffer): Promise<GuestDoor> {
    return this.work.readAsGuest(visit, (_tx, guest) => Promise.resolve(doorOf(guest, guest.confirmedAt !== null)));
  }

  async askForCode(visit: Buffer): Promise<CodeSent> {
    const { linkId, sentTo } = await this.work.readAsGuest(visit, (_tx, guest) => Promise.resolve(guest));
    await this.limits.take(`guest-code:${linkId}`, CODES_PER_LINK);
    const now = this.clock.now();
    await this.work.writeAsGuest(visit, async (tx, guest) => {
      const codeId = v7();
      await this.repository.askForCode(tx, guest, codeId, now);
      await this.queue.enqueue(tx, 'send_guest_code', { codeId });
    });
    return { sentTo, expiresAt: new Date(now.getTime() + CODE_MINUTES * 60_000).toISOString() };
  }

  /** A wrong code is committed, so that tries are counted; a right one gives the visit a new token. */
  async confirm(visit: Buffer, code: string): Promise<Entered> {
    const token = newToken();
    const now = this.clock.now();
    const { outcome, guest } = await this.work.writeAsGuest(visit, async (tx, guest) => {
      const hash = codeHash(this.configuration.CODE_SECRET, codeSubject(guest.sessionId), code);
      const { outcome, first } = await this.repository.confirm(tx, guest, hash, tokenHash(token), now);
      if (first) await this.repository.record(tx, this.record.text({ act: 'guest_link.opened', by: guest.personId, data: { link: guest.linkId } }));
      return { outcome, guest };
    });
    if (outcome !== 'right') throw new Problem(outcome === 'wrong' ? 'wrong_code' : 'code_expired');
    return { door: doorOf(guest, true), token };
  }

  async leave(visit: Buffer): Promise<void> {
    await this.work.writeAsGuest(visit, (tx, guest) => this.repository.leave(tx, guest, this.clock.now()));
  }

  visit(visit: Buffer): Promise<GuestVisit> {
    return this.work.readAsGuest(visit, (tx, guest) => {
      requireConfirmed(guest);
      return this.seen(tx);
    });
  }

  size(visit: Buffer, photoId: string, size: string): Promise<StoredSize> {
    return this.work.readAsGuest(visit, async (tx, guest) => {
      requireConfirmed(guest);
      const stored = await this.repository.size(tx, photoId, size);
      if (!stored) throw new Problem('not_found');
      return stored;
    });
  }

  /** What the link is for, as it is now. */
  async seen(tx: Tx): Promise<GuestVisit> {
    const visit = await this.repository.visit(tx);
    if (!visit) throw new Problem('visit_over');
    return { ...visit, counts: countsAsProof(visit.senderSide, visit.onBehalf), today: this.clock.today(visit.timeZone) };
  }
}

const doorOf = ({ firmName, sentTo, expiresAt }: OpenedLink, confirmed: boolean): GuestDoor => ({ firmName, sentTo, expiresAt: expiresAt.toISOString(), confirmed });

/** Without its code a link shows nothing of what it is for. */
export function requireConfirmed(guest: Guest): Date {
  if (!guest.confirmedAt) throw new Problem('presence_needed');
  return guest.confirmedAt;
}
