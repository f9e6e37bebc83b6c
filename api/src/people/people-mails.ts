import { Inject, Injectable } from '@nestjs/common';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { Tx } from '../common/unit-of-work.ts';
import { NoticeRepository } from '../notices/notice.repository.ts';
import { PeopleRepository } from './people.repository.ts';

interface Left {
  firmId: string;
  firmName: string;
  jobId: string;
  jobName: string;
  actorName: string;
  actorEmail: string;
  personName: string;
  roleName: string;
  /** What is asked for anew from those who stay. */
  anew: readonly string[];
}

/** Who hears that somebody is no longer on a job. */
@Injectable()
export class PeopleMails {
  constructor(
    private readonly repository: PeopleRepository,
    private readonly notices: NoticeRepository,
    @Inject(CONFIGURATION) private readonly configuration: Configuration,
  ) {}

  async accessEnded(tx: Tx, personId: string, { firmId, firmName, jobId, jobName, actorName, actorEmail, roleName }: Left): Promise<void> {
    const data = { place: jobName, roleName, actorName, firmName, replyToName: actorName, replyToEmail: actorEmail };
    await this.notices.post(tx, { firmId, jobId, kind: 'access-ended', to: { personId }, data });
  }

  /** Homeowners and lenders who stay; after an invitation that was taken back only where something is asked for anew. */
  async toThoseWhoStay(tx: Tx, left: Left, wasInvited = false): Promise<void> {
    const { firmId, firmName, jobId, jobName, actorName, actorEmail, personName, roleName, anew } = left;
    const headline = wasInvited ? `The invitation of ${personName} to ${jobName} is taken back` : `${personName} is no longer on ${jobName}`;
    const url = `${this.configuration.PUBLIC_URL}/jobs/${jobId}`;
    const data = { headline, wasInvited, jobName, personName, roleName, actorName, firmName, anew: anew.join(', '), url, replyToName: actorName, replyToEmail: actorEmail };
    const staying = await this.repository.outside(tx, jobId);
    await this.notices.postAll(tx, staying.map((personId) => ({ firmId, jobId, kind: 'person-left' as const, to: { personId }, data })));
  }
}
