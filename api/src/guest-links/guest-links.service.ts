import { Injectable } from '@nestjs/common';
import { randomBytes } from 'node:crypto';
import { v7 } from 'uuid';
import { countsAsProof, maySendFor, type GuestLink, type GuestLinks, type SenderSide, type SendInspectorLink } from '@tallypole/shared/schemas/guest-links';
import { firmRoles, type Role } from '@tallypole/shared/schemas/roles';
import { requireOnJob } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { RateLimitGuard } from '../common/rate-limit.guard.ts';
import { UnitOfWork, type Actor, type Tx } from '../common/unit-of-work.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { RecordRepository } from '../record/record.repository.ts';
import { GuestLinksRepository, type LockedLink } from './guest-links.repository.ts';
import { whoHash } from './guest-tokens.ts';

/** Links that one person may have mailed: each goes to an address that they typed. */
const LINKS_PER_PERSON = { hits: 30, seconds: 3_600 };
const SALT_BYTES = 16;

/** What one link is sent or taken back by. */
interface OfLink {
  jobId: string;
  linkId: string;
}

/** Sends inspectors without an account a link to what they shall look at, and takes it back. */
@Injectable()
export class GuestLinksService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly repository: GuestLinksRepository,
    private readonly record: RecordRepository,
    private readonly queue: QueueRepository,
    private readonly limits: RateLimitGuard,
    private readonly clock: Clock,
  ) {}

  list(actor: Actor, jobId: string): Promise<GuestLinks> {
    return this.work.readJob(actor, jobId, 'guest_link.read', (tx, roles) => this.found(tx, jobId, roles));
  }

  async send(actor: Actor, jobId: string, input: SendInspectorLink, key: string): Promise<Answered<GuestLinks>> {
    await this.limits.take(`guest-link:${actor.personId}`, LINKS_PER_PERSON);
    let roles: Role[] = [];
    return await this.commands.run<GuestLinks>(actor, {
      operation: 'guest_link.send',
      key,
      input: { jobId, ...input },
      authorize: async (tx) => {
        roles = await requireOnJob(tx, 'guest_link.send', jobId);
      },
      act: async (tx) => {
        await this.write(tx, actor, jobId, { input, side: sideOf(roles) });
        return await this.found(tx, jobId, roles);
      },
    });
  }

  /** Mails a new link in the place of the old one, which is dead at once; what was answered and isn't proven may be answered again. */
  async sendAgain(actor: Actor, jobId: string, linkId: string, key: string): Promise<Answered<GuestLinks>> {
    await this.limits.take(`guest-link:${actor.personId}`, LINKS_PER_PERSON);
    return await this.onLink(actor, { jobId, linkId }, { act: 'guest_link.sent_again', key }, async (tx, link) => {
      if ((await this.repository.unproven(tx, linkId)) === 0) throw new Problem('wrong_state', { detail: 'Everything this link asks for is proven.' });
      const now = this.clock.now();
      await this.repository.renew(tx, linkId, now, daysLater(now, link.days));
      await this.queue.enqueue(tx, 'send_guest_link', { linkId, firmId: link.firmId }, { key: `guest_link:${linkId}` });
    });
  }

  revoke(actor: Actor, jobId: string, linkId: string, key: string): Promise<Answered<GuestLinks>> {
    return this.onLink(actor, { jobId, linkId }, { act: 'guest_link.revoked', key }, async (tx, link) => {
      if (link.revokedAt) throw new Problem('wrong_state', { detail: 'This link is revoked already.' });
      await this.repository.revoke(tx, linkId, this.clock.now());
    });
  }

  private async onLink(actor: Actor, { jobId, linkId }: OfLink, { act, key }: { act: string; key: string }, effect: (tx: Tx, link: LockedLink) => Promise<void>): Promise<Answered<GuestLinks>> {
    let roles: Role[] = [];
    return await this.commands.run<GuestLinks>(actor, {
      operation: act,
      key,
      input: { jobId, linkId },
      authorize: async (tx) => {
        roles = await requireOnJob(tx, 'guest_link.send', jobId);
      },
      act: async (tx) => {
        const link = await this.repository.lock(tx, jobId, linkId);
        if (!link) throw new Problem('not_found');
        // a link is its side's own: the firm can't take back whom the lender sends, nor the other way round
        if (link.senderSide !== sideOf(roles)) throw new Problem('not_allowed', { detail: 'Somebody of another side of the job sent this link.' });
        await effect(tx, link);
        await this.record.append(tx, { firmId: link.firmId, jobId, act, by: actor.personId, data: { link: linkId } });
        return await this.found(tx, jobId, roles);
      },
    });
  }

  private async write(tx: Tx, actor: Actor, jobId: string, { input, side }: { input: SendInspectorLink; side: SenderSide }): Promise<void> {
    const { id, onBehalf, milestoneIds, name, email, note, days } = input;
    if (!maySendFor[side].includes(onBehalf)) throw Problem.field('/onBehalf', 'Choose whose inspector it is: your own, or the town\'s.');
    const { firmId, milestones, isMember } = await this.repository.facts(tx, jobId, milestoneIds, email);
    if (milestones.length !== milestoneIds.length) throw Problem.field('/milestoneIds', 'Choose milestones of this job.');
    if (milestones.some(({ state }) => state === 'proven')) throw Problem.field('/milestoneIds', 'A milestone that is proven needs nobody to look at it.');
    if (isMember) throw Problem.field('/email', 'This address belongs to somebody of the firm. Whoever looks has to come from outside.');
    const now = this.clock.now();
    const salt = randomBytes(SALT_BYTES);
    const guestId = v7();
    await this.repository.addGuest(tx, guestId, name, now);
    await this.repository.add(tx, { firmId, jobId, id, name, email, note, salt, guestId, side, days, onBehalf, milestoneIds, now, expiresAt: daysLater(now, days) });
    await this.queue.enqueue(tx, 'send_guest_link', { linkId: id, firmId }, { key: `guest_link:${id}` });
    const data = { link: id, kind: 'inspector', milestones: milestoneIds, onBehalf, senderSide: side, whoSha256: whoHash(salt, [email]) };
    await this.record.append(tx, { firmId, jobId, act: 'guest_link.sent', by: actor.personId, data });
  }

  private async found(tx: Tx, jobId: string, roles: readonly Role[]): Promise<GuestLinks> {
    const side = sideOf(roles);
    const rows = await this.repository.list(tx, jobId, this.clock.now());
    const items = rows.map((row): GuestLink => ({ ...row, counts: countsAsProof(row.senderSide, row.onBehalf), mine: row.senderSide === side }));
    return { items };
  }
}

/** A firm's member acts for the firm, whatever else they are on the job: nobody makes themselves independent. */
function sideOf(roles: readonly Role[]): SenderSide {
  if (roles.some((role) => (firmRoles as readonly Role[]).includes(role))) return 'firm';
  return roles.includes('lender') ? 'lender' : 'homeowner';
}

const daysLater = (now: Date, days: number): Date => new Date(now.getTime() + days * 86_400_000);
