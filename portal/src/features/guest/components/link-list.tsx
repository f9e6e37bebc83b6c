import { useQueryClient } from '@tanstack/react-query';
import type { GuestLink, GuestLinks, GuestLinkState } from '@tallypole/shared/schemas/guest-links';
import { writtenInstant } from '../../../lib/dates.ts';
import { ActButton } from '../../../ui/act-button.tsx';
import { StateTag, type Meaning } from '../../../ui/state-tag.tsx';
import { toast } from '../../../ui/toast.ts';
import { actOnLink, linksQuery } from '../api/guest-links.ts';
import { strings } from '../strings.ts';
import classes from './guest.module.css';

const MEANING: Readonly<Record<GuestLinkState, Meaning>> = { on_its_way: 'waits', sent: 'waits', opened: 'waits', done: 'settled', expired: 'neutral', revoked: 'refused' };

/** The links of a job, newest first: to whom, by whom, for what, and what became of them. */
export const LinkList = ({ jobId, links, timeZone, maySend }: { jobId: string; links: readonly GuestLink[]; timeZone: string; maySend: boolean }) => (
  <ul className={classes['links']}>
    {links.map((link) => {
      const day = (instant: string) => writtenInstant(instant, timeZone);
      return (
        <li key={link.id}>
          <div className={classes['linkHead']}>
            <StateTag meaning={MEANING[link.state]}>{strings.linkStates[link.state]}</StateTag>
            <strong>{link.name}</strong>
            <span>{strings.whose[link.onBehalf]}</span>
            <span className="quiet">{link.email}</span>
          </div>
          <div>{link.milestones.map(({ name, answeredAt }) => `${name} (${answeredAt ? strings.linkAnswered(day(answeredAt)) : strings.notAnswered})`).join(', ')}</div>
          <div className="quiet">
            {strings.sentBy(link.sentBy.name, strings.side[link.senderSide], day(link.sentAt))}{' '}
            {link.openedAt ? `${strings.openedOn(day(link.openedAt))} ` : ''}
            {link.state === 'revoked' || link.state === 'done' ? '' : strings.goodUntil(day(link.expiresAt))}
            {link.counts ? '' : ` ${strings.countsNot}`}
          </div>
          {maySend && link.mine ? <LinkActs jobId={jobId} link={link} /> : null}
        </li>
      );
    })}
  </ul>
);

function LinkActs({ jobId, link }: { jobId: string; link: GuestLink }) {
  const queries = useQueryClient();
  const done = (message: string) => (links: GuestLinks) => {
    queries.setQueryData(linksQuery(jobId).queryKey, links);
    toast(message);
  };
  const about = link.name;
  return (
    <div className={classes['acts']}>
      <ActButton scope={`link-again:${link.id}:${link.sentAt}`} label={strings.sendAgain} about={about} send={(key) => actOnLink(jobId, link.id, 'again', key)} onDone={done(strings.againDone)} />
      {link.state === 'revoked' ? null : (
        <ActButton scope={`link-revoke:${link.id}:${link.sentAt}`} label={strings.revoke} about={about} variant="subtle" send={(key) => actOnLink(jobId, link.id, 'revoke', key)} onDone={done(strings.revoked)} />
      )}
    </div>
  );
}
