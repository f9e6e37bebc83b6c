import { MantineProvider } from '@mantine/core';
import { QueryClientProvider } from '@tanstack/react-query';
import { lazy, Suspense } from 'react';
import { RouterProvider } from 'react-router-dom';
import { queryClient } from '../lib/query-client.ts';
import { useSaid } from '../ui/toast.ts';
import { router } from './router.tsx';
import { theme } from './theme.ts';

const Toasts = lazy(() => import('../ui/toasts.tsx'));

export const App = () => (
  <MantineProvider theme={theme} defaultColorScheme="auto">
    <SaidToasts />
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  </MantineProvider>
);

function SaidToasts() {
  if (!useSaid()) return null;
  return (
    <Suspense fallback={null}>
      <Toasts />
    </Suspense>
  );
}
