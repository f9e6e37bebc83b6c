import { createBrowserRouter, Navigate } from 'react-router-dom';
import { featureRoutes } from './feature-routes.tsx';
import { ErrorPage } from './error-page.tsx';
import { JobLayout } from './job-layout.tsx';
import { NotFoundPage } from './not-found-page.tsx';
import { SignedIn } from './signed-in.tsx';

/** While the first page's code is on its way. */
const Nothing = () => null;

/** Sign-in and what a mailed link opens stand alone; everything else needs a person; a job's pages stand beside its pole. */
export const router = createBrowserRouter([
  { path: '/sign-in', HydrateFallback: Nothing, lazy: () => import('../features/auth/pages/sign-in-page.tsx'), errorElement: <ErrorPage /> },
  { path: '/address-undo', HydrateFallback: Nothing, lazy: () => import('../features/account/pages/address-undo-page.tsx'), errorElement: <ErrorPage /> },
  { path: '/guest', HydrateFallback: Nothing, lazy: () => import('../features/guest/pages/guest-page.tsx'), errorElement: <ErrorPage /> },
  {
    path: '/',
    HydrateFallback: Nothing,
    element: <SignedIn />,
    errorElement: <ErrorPage />,
    children: [
      { index: true, element: <Navigate to="/jobs" replace /> },
      { path: 'your-name', lazy: () => import('../features/auth/pages/your-name-page.tsx') },
      { path: 'jobs', lazy: () => import('../features/jobs/pages/jobs-page.tsx') },
      { path: 'firms/new', lazy: () => import('../features/auth/pages/start-firm-page.tsx') },
      { path: 'firms/:firmId/jobs/new', lazy: () => import('../features/jobs/pages/create-job-page.tsx') },
      ...featureRoutes.wide,
      {
        path: 'jobs/:jobId',
        element: <JobLayout />,
        errorElement: <ErrorPage />,
        children: [
          { path: 'people', lazy: () => import('../features/people/pages/people-page.tsx') },
          ...featureRoutes.job,
        ],
      },
      { path: '*', element: <NotFoundPage /> },
    ],
  },
]);
