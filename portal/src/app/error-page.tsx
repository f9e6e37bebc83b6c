import { Button } from '@mantine/core';
import { useRouteError } from 'react-router-dom';
import { isProblemWith, offline } from '../lib/problem.ts';
import { FailureState, PageHead } from '../ui/page.tsx';
import { NotFoundPage } from './not-found-page.tsx';

/** What a page shows that could not be shown. */
export function ErrorPage() {
  const error = useRouteError();
  if (isProblemWith(error, 'not_found')) return <NotFoundPage />;
  // a page of an older build may ask for a file that is gone
  const unloaded = error instanceof TypeError && /dynamically imported module|Importing a module/.test(error.message);
  const outdated = unloaded && navigator.onLine;
  return (
    <main id="main" style={{ padding: 24, maxWidth: 640, margin: '0 auto' }}>
      <PageHead title={outdated ? 'There is a newer version of this page' : 'Sorry, there is a problem'} />
      {outdated ? <p>Load it to go on. What you typed is kept.</p> : <FailureState error={unloaded ? offline() : error} />}
      <p style={{ marginTop: 16 }}>
        <Button onClick={() => window.location.reload()}>Load the page again</Button>
      </p>
    </main>
  );
}
