import { Button } from '@mantine/core';
import { useQuery, useQueryClient } from '@tanstack/react-query';
import type { GuestDoor } from '@tallypole/shared/schemas/guest-links';
import { useCallback, useEffect, useState, type ReactNode } from 'react';
import { useLocation, useNavigate } from 'react-router-dom';
import { dropEverything } from '../../../lib/drafts.ts';
import { isProblemWith } from '../../../lib/problem.ts';
import { FailureState, LoadingState, Note, PageHead } from '../../../ui/page.tsx';
import { toast } from '../../../ui/toast.ts';
import { doorQuery, leave, visitQuery } from '../api/guest.ts';
import { Door } from '../components/door.tsx';
import classes from '../components/guest.module.css';
import { MilestoneToSee } from '../components/milestone-to-see.tsx';
import type { Who } from '../components/inspect-form.tsx';
import { strings } from '../strings.ts';

/** Where a mailed link leads. Its token comes in the fragment, which no server and no other site is told, and leaves the address at once. */
export function Component() {
  const { hash, pathname } = useLocation();
  const navigate = useNavigate();
  const [token, setToken] = useState<string | null>(null);
  // kept in memory alone: what the browser keeps of an address or of a page's state outlives the visit
  if (hash !== '' && hash.slice(1) !== token) setToken(hash.slice(1));
  useEffect(() => {
    if (hash !== '') void navigate(pathname, { replace: true });
  }, [hash, pathname, navigate]);
  return hash === '' ? <Guest key={token} token={token} /> : null;
}

function Guest({ token }: { token: string | null }) {
  const queries = useQueryClient();
  const [left, setLeft] = useState(false);
  const query = doorQuery(token);
  const { data: door, error, refetch } = useQuery({ ...query, enabled: !left });
  const opened = (next: GuestDoor) => queries.setQueryData(query.queryKey, next);
  const goAway = () => {
    void leave()
      .catch(() => undefined)
      .finally(() => {
        dropEverything();
        queries.removeQueries({ queryKey: ['guest'] });
        setLeft(true);
      });
  };
  if (left) return <Frame><PageHead title={strings.leftTitle}><p>{strings.left}</p></PageHead></Frame>;
  if (error) return <Frame>{isOver(error) ? <Over /> : <FailureState error={error} onRetry={() => void refetch()} />}</Frame>;
  if (!door) return <Frame><LoadingState /></Frame>;
  if (!door.confirmed) return <Frame><Door door={door} onOpened={opened} /></Frame>;
  return (
    <Frame aside={<Button variant="subtle" onClick={goAway}>{strings.leave}</Button>}>
      <Visit />
    </Frame>
  );
}

function Visit() {
  const queries = useQueryClient();
  const { data: visit, error, refetch } = useQuery(visitQuery);
  const [who, setWho] = useState<Who | null>(null);
  const look = useCallback(() => void queries.invalidateQueries({ queryKey: visitQuery.queryKey }), [queries]);
  if (error) return isOver(error) ? <PageHead title={strings.overTitle}><p>{strings.visitOver}</p></PageHead> : <FailureState error={error} onRetry={() => void refetch()} />;
  if (!visit) return <LoadingState />;
  return (
    <>
      <PageHead title={visit.jobName}>
        <p>{visit.place}</p>
        <p className="quiet">{strings.asked(visit.senderName, visit.firmName)}</p>
      </PageHead>
      {visit.note ? <p className={classes['quote']}>{visit.note}</p> : null}
      {visit.senderSide === 'firm' ? <Note>{visit.counts ? strings.by.town : strings.by.firm}</Note> : null}
      {visit.milestones.map((milestone) => (
        <MilestoneToSee
          key={milestone.id}
          visit={visit}
          milestone={milestone}
          who={who ?? { name: visit.name, company: '', license: '' }}
          onPhoto={look}
          onAnswer={(after, by) => {
            setWho(by);
            queries.setQueryData(visitQuery.queryKey, after);
            toast(strings.recorded);
          }}
        />
      ))}
    </>
  );
}

/** One page for every link that is not good: it tells nobody which of them it is. */
const Over = () => (
  <PageHead title={strings.overTitle}>
    <p>{strings.over}</p>
    <p>{strings.overDo}</p>
  </PageHead>
);

const isOver = (error: unknown): boolean => isProblemWith(error, 'link_over') || isProblemWith(error, 'visit_over') || isProblemWith(error, 'invalid_input');

const Frame = ({ children, aside }: { children: ReactNode; aside?: ReactNode }) => (
  <main className={classes['page']} id="main">
    <div className={classes['brand']}>
      <span>
        <img src="/icon.svg" alt="" width={28} height={28} /> {strings.brand}
      </span>
      {aside}
    </div>
    {children}
  </main>
);
