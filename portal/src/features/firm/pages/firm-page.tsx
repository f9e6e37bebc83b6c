import { useSuspenseQuery } from '@tanstack/react-query';
import { may } from '@tallypole/shared/schemas/permissions';
import { Suspense } from 'react';
import { useParams } from 'react-router-dom';
import { useMe } from '../../../lib/me.ts';
import { LinkButton } from '../../../ui/link-button.tsx';
import { LoadingState, PageHead, Section } from '../../../ui/page.tsx';
import { membersQuery } from '../api/members.ts';
import { FirmInvitations, MemberForm } from '../components/firm-invitations.tsx';
import classes from '../components/firm.module.css';
import { MemberList } from '../components/member-list.tsx';
import { WhoLeft } from '../components/people-who-left.tsx';
import { strings } from '../strings.ts';

/** Who belongs to the firm, and who is invited; a principal changes it here. */
export const Component = () => (
  <main className={classes['page']} id="main">
    <Suspense fallback={<LoadingState />}>
      <Firm />
    </Suspense>
  </main>
);

function Firm() {
  const { firmId = '' } = useParams();
  const me = useMe();
  const { data } = useSuspenseQuery(membersQuery(firmId));
  const firm = me.firms.find(({ id }) => id === firmId);
  const roles = firm ? [firm.role] : [];
  const rules = may(roles, 'firm.members');
  return (
    <>
      <PageHead title={firm?.name ?? strings.yourFirm}>
        <p className="quiet">{strings.explain}</p>
        <div className={classes['ways']}>
          {may(roles, 'firm.settings') ? <LinkButton to={`/firms/${firmId}/settings`} variant="outline">{strings.toSettings}</LinkButton> : null}
          {may(roles, 'firm.pricing') ? <LinkButton to={`/firms/${firmId}/pricing`} variant="outline">{strings.toPricing}</LinkButton> : null}
        </div>
      </PageHead>
      <MemberList firmId={firmId} members={data.members} principalId={rules ? me.person.id : null} />
      {data.invitations.length > 0 ? (
        <Section title={strings.invited}>
          <FirmInvitations firmId={firmId} invitations={data.invitations} mayAct={may(roles, 'firm.invite')} />
        </Section>
      ) : null}
      {may(roles, 'firm.invite') ? (
        <Section title={strings.invite}>
          <MemberForm firmId={firmId} key={data.invitations.length + data.members.length} />
        </Section>
      ) : null}
      {rules ? <WhoLeft firmId={firmId} /> : null}
    </>
  );
}
