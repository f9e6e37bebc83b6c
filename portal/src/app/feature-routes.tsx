import type { RouteObject } from 'react-router-dom';

/** Pages of the features, each loaded when it is opened. `job` paths stand below /jobs/:jobId, `wide` ones at the top. */
export const featureRoutes: { job: RouteObject[]; wide: RouteObject[] } = {
  wide: [],
  job: [{ index: true, lazy: () => import('../features/jobs/pages/house-page.tsx') }],
};
