import { QueryClientProvider, type QueryClient } from '@tanstack/react-query';
import { RouterProvider, type createBrowserRouter } from 'react-router-dom';
import { Toasts } from '#src/components/ui/toasts.tsx';

interface Props {
  queryClient: QueryClient;
  router: ReturnType<typeof createBrowserRouter>;
}

export function App({ queryClient, router }: Props) {
  return (
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
      <Toasts />
    </QueryClientProvider>
  );
}
