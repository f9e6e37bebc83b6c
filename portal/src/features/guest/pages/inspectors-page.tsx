import { useSuspenseQuery } from '@tanstack/react-query';
import type { SenderSide } from '@tallypole/shared/schemas/guest-links';
import { may } from '@tallypole/shared/schemas/permissions';
import { firmRoles, type Role } from '@tallypole/shared/schemas/roles';
import { useSearchParams } from 'react-router-dom';
import { useJob } from '../../../lib/job.ts';
import { milestonesQuery } from '../../../lib/milestones.ts';
import { EmptyState, PageHead } from '../../../ui/page.tsx';
import { linksQuery } from '../api/guest-links.ts';
import { LinkList } from '../components/link-list.tsx';
import { SendForm } from '../components/send-form.tsx';
import { strings } from '../strings.ts';

/** Links by which inspectors without an account look at milestones. */
export function Component() {
  const job = useJob();
  const [params] = useSearchParams();
  const { data } = useSuspenseQuery(linksQuery(job.id));
  const { data: milestones } = useSuspenseQuery(milestonesQuery(job.id));
  const open = milestones.items.filter(({ state }) => state !== 'proven');
  const maySend = may(job.roles, 'guest_link.send');
  return (
    <>
      <PageHead title={strings.title}>
        <p className="quiet">{strings.explain}</p>
      </PageHead>
      {data.items.length === 0 ? <EmptyState>{strings.none}</EmptyState> : <LinkList jobId={job.id} links={data.items} timeZone={job.timeZone} maySend={maySend} />}
      {maySend ? open.length === 0 ? <p className="quiet">{strings.allProven}</p> : <SendForm key={data.items.length} jobId={job.id} side={sideOf(job.roles)} milestones={open} chosen={params.get('milestone')} /> : null}
    </>
  );
}

function sideOf(roles: readonly Role[]): SenderSide {
  if (roles.some((role) => (firmRoles as readonly Role[]).includes(role))) return 'firm';
  return roles.includes('lender') ? 'lender' : 'homeowner';
}
