import { MantineProvider } from '@mantine/core';
import type { ReactNode } from 'react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';

/** A component at an address, as a page of the portal has it. */
export function Page({ children, at = '/', path = '*' }: { children: ReactNode; at?: string; path?: string }) {
  const router = createMemoryRouter([{ path, element: children }, { path: '*', element: <p>another page</p> }], { initialEntries: [at] });
  return (
    <MantineProvider env="test">
      <RouterProvider router={router} />
    </MantineProvider>
  );
}
