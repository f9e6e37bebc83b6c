import { lazy, Suspense } from 'react';
import { useSearchParams } from 'react-router-dom';
import { LinkButton } from '../ui/link-button.tsx';
import { PageHead } from '../ui/page.tsx';

const InvitationOutcome = lazy(() => import('../features/people/components/invitation-outcome.tsx'));

/** Also where an invitation leads that has expired or was taken back: whom it was sent to is told which. */
export function NotFoundPage() {
  const [params] = useSearchParams();
  const invitation = params.get('invitation');
  return (
    <main style={{ padding: 24, maxWidth: 640, margin: '0 auto' }} id="main">
      {invitation ? (
        <Suspense fallback={null}>
          <InvitationOutcome invitationId={invitation} fallback={<Nothing />} />
        </Suspense>
      ) : (
        <Nothing />
      )}
    </main>
  );
}

const Nothing = () => (
  <>
    <PageHead title="There is nothing here, or it is not for you">
      <p className="quiet">If somebody sent you this address, ask them whether they invited the one you are signed in with.</p>
    </PageHead>
    <LinkButton to="/jobs">Go to your jobs</LinkButton>
  </>
);
