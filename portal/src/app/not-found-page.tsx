import { LinkButton } from '../ui/link-button.tsx';
import { PageHead } from '../ui/page.tsx';

export const NotFoundPage = () => (
  <main style={{ padding: 24, maxWidth: 640, margin: '0 auto' }} id="main">
    <PageHead title="There is nothing here, or it is not for you">
      <p className="quiet">If somebody sent you this address, ask them whether they invited the one you are signed in with.</p>
    </PageHead>
    <LinkButton to="/jobs">Go to your jobs</LinkButton>
  </main>
);
