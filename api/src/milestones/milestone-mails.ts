import { Inject, Injectable } from '@nestjs/common';
import { formatRate } from '@tallypole/shared/money';
import type { InspectionResult } from '@tallypole/shared/schemas/milestones';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import type { NoticeKind } from '../notices/templates.ts';
import { MilestonesRepository, type LockedMilestone } from './milestones.repository.ts';

interface Place {
  jobId: string;
  milestoneId: string;
  actorId: string;
}

const SEEN: Readonly<Record<InspectionResult, { subject: string; word: string }>> = {
  passed: { subject: 'is proven', word: 'has confirmed that it is done' },
  partial: { subject: 'is done in part', word: 'has seen a part of it in place' },
  failed: { subject: 'was not accepted', word: 'could not confirm that it is done' },
};

/** Who hears of a milestone: those outside when it is claimed, those inside when it was looked at. Never whoever acted. */
@Injectable()
export class MilestoneMails {
  constructor(
    private readonly repository: MilestonesRepository,
    private readonly notices: NoticeRepository,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  async claimed(tx: Tx, milestone: LockedMilestone, place: Place, facts: { photos: number; note: string }): Promise<void> {
    const photos = facts.photos === 1 ? '1 photo' : `${facts.photos} photos`;
    await this.post(tx, 'milestone-claimed', milestone, place, await this.repository.observers(tx, place.jobId), { photos, note: facts.note });
  }

  async seen(tx: Tx, milestone: LockedMilestone, place: Place, facts: { result: InspectionResult; percent: number; note: string }): Promise<void> {
    const { subject, word } = SEEN[facts.result];
    await this.post(tx, 'milestone-seen', milestone, place, inside(milestone), { outcome: subject, word, percent: formatRate(facts.percent), note: facts.note });
  }

  async reopened(tx: Tx, milestone: LockedMilestone, place: Place, reason: string): Promise<void> {
    const everybody = [...(await this.repository.observers(tx, place.jobId)), ...inside(milestone)];
    await this.post(tx, 'milestone-reopened', milestone, place, everybody, { reason });
  }

  private async post(tx: Tx, kind: NoticeKind, milestone: LockedMilestone, { jobId, milestoneId, actorId }: Place, people: string[], facts: Record<string, string>): Promise<void> {
    const { name: actorName, email } = await this.repository.actor(tx);
    const { firmId, jobName, name: milestoneName } = milestone;
    const url = `${this.configuration.PUBLIC_URL}/jobs/${jobId}/milestones/${milestoneId}`;
    const data = { jobName, milestoneName, actorName, url, ...facts, replyToName: actorName, replyToEmail: email };
    for (const personId of new Set(people.filter((id) => id !== actorId))) await this.notices.post(tx, { firmId, jobId, kind, to: { personId }, data });
  }
}

/** Within the firm those who are concerned: who claimed it and who set up the job. */
const inside = ({ claimedBy, jobCreatedBy }: LockedMilestone): string[] => (claimedBy === null ? [jobCreatedBy] : [claimedBy, jobCreatedBy]);
