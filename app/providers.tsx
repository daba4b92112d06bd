import { QueryClientProvider, type QueryClient } from '@tanstack/react-query';
import { StrictMode, useState } from 'react';
import { RouterProvider } from 'react-router-dom';
import { ToastProvider } from './components/ui/toast';
import { createQueryClient } from './lib/query-client';

/** `queryClient` is given by tests; the site makes its own. */
export function Providers({ router, queryClient }: { router: Parameters<typeof RouterProvider>[0]['router']; queryClient?: QueryClient }) {
  const [client] = useState(() => queryClient ?? createQueryClient());
  return (
    <StrictMode>
      <QueryClientProvider client={client}>
        <ToastProvider>
          <RouterProvider router={router} />
        </ToastProvider>
      </QueryClientProvider>
    </StrictMode>
  );
}
