import { Button } from '@mantine/core';
import { useQueryClient } from '@tanstack/react-query';
import type { GuestLink, GuestLinkState } from '@tallypole/shared/schemas/guest-links';
import { useState } from 'react';
import { writtenInstant } from '../../../lib/dates.ts';
import { useIdempotencyKey } from '../../../lib/idempotency-key.ts';
import { FailureState } from '../../../ui/page.tsx';
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
  const [busy, setBusy] = useState<'again' | 'revoke' | null>(null);
  const [failure, setFailure] = useState<unknown>(null);
  const keys = { again: useIdempotencyKey(`link-again:${link.id}:${link.sentAt}`), revoke: useIdempotencyKey(`link-revoke:${link.id}:${link.sentAt}`) };
  const perform = async (act: 'again' | 'revoke') => {
    setBusy(act);
    setFailure(null);
    try {
      queries.setQueryData(linksQuery(jobId).queryKey, await actOnLink(jobId, link.id, act, keys[act].key));
      keys[act].spend();
      toast(act === 'again' ? strings.againDone : strings.revoked);
    } catch (error) {
      setFailure(error);
    } finally {
      setBusy(null);
    }
  };
  return (
    <>
      {failure === null ? null : <FailureState error={failure} />}
      <div className={classes['acts']}>
        <Button variant="outline" loading={busy === 'again'} onClick={() => void perform('again')} aria-label={`${strings.sendAgain}: ${link.name}`}>{strings.sendAgain}</Button>
        {link.state === 'revoked' ? null : <Button variant="subtle" loading={busy === 'revoke'} onClick={() => void perform('revoke')} aria-label={`${strings.revoke}: ${link.name}`}>{strings.revoke}</Button>}
      </div>
    </>
  );
}
