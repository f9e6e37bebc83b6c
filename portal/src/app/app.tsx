import { MantineProvider } from '@mantine/core';
import { Notifications } from '@mantine/notifications';
import { QueryClientProvider } from '@tanstack/react-query';
import { RouterProvider } from 'react-router-dom';
import { queryClient } from '../lib/query-client.ts';
import { router } from './router.tsx';
import { theme } from './theme.ts';

export const App = () => (
  <MantineProvider theme={theme} defaultColorScheme="auto">
    <Notifications position="bottom-center" />
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  </MantineProvider>
);
