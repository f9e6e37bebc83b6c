import type { RouteObject } from 'react-router-dom';

/** Pages of the features, each loaded when it is opened. `job` paths stand below /jobs/:jobId, `wide` ones at the top. */
export const featureRoutes: { job: RouteObject[]; wide: RouteObject[] } = {
  wide: [
    { path: 'account', lazy: () => import('../features/account/pages/account-page.tsx') },
    { path: 'account/second-step', lazy: () => import('../features/account/pages/second-step-page.tsx') },
    { path: 'firms/:firmId', lazy: () => import('../features/firm/pages/firm-page.tsx') },
    { path: 'firms/:firmId/settings', lazy: () => import('../features/firm/pages/firm-settings-page.tsx') },
    { path: 'firms/:firmId/pricing', lazy: () => import('../features/changes/pages/firm-pricing-page.tsx') },
    { path: 'lending', lazy: () => import('../features/lender/pages/lending-page.tsx') },
    { path: 'payouts', lazy: () => import('../features/payments/pages/payouts-page.tsx') },
  ],
  job: [
    { index: true, lazy: () => import('../features/jobs/pages/house-page.tsx') },
    { path: 'schedule', lazy: () => import('../features/schedule/pages/schedule-page.tsx') },
    { path: 'schedule/import', lazy: () => import('../features/schedule/pages/import-page.tsx') },
    { path: 'milestones/:milestoneId', lazy: () => import('../features/milestones/pages/milestone-page.tsx') },
    { path: 'inspectors', lazy: () => import('../features/guest/pages/inspectors-page.tsx') },
    { path: 'changes', lazy: () => import('../features/changes/pages/changes-page.tsx') },
    { path: 'changes/new', lazy: () => import('../features/changes/pages/new-change-page.tsx') },
    { path: 'takeoff', lazy: () => import('../features/takeoff/pages/takeoff-page.tsx') },
    { path: 'changes/:changeId', lazy: () => import('../features/changes/pages/change-page.tsx') },
    { path: 'changes/:changeId/edit', lazy: () => import('../features/changes/pages/edit-change-page.tsx') },
    { path: 'changes/:changeId/revise', lazy: () => import('../features/changes/pages/edit-change-page.tsx') },
    { path: 'draws', lazy: () => import('../features/draws/pages/draws-page.tsx') },
    { path: 'draws/:drawId', lazy: () => import('../features/draws/pages/draw-page.tsx') },
    { path: 'draws/:drawId/payments/:paymentId', lazy: () => import('../features/payments/pages/payment-page.tsx') },
    { path: 'money', lazy: () => import('../features/payments/pages/money-page.tsx') },
    { path: 'loan', lazy: () => import('../features/lender/pages/loan-page.tsx') },
    { path: 'record', lazy: () => import('../features/record/pages/record-page.tsx') },
    { path: 'site', lazy: () => import('../features/site/pages/site-page.tsx') },
    { path: 'site/:milestoneId', lazy: () => import('../features/site/pages/capture-page.tsx') },
  ],
};
