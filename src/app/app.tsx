import { QueryClientProvider } from '@tanstack/react-query';
import { createBrowserRouter, RouterProvider } from 'react-router-dom';
import { whenSignedOut } from '../api/http.ts';
import { queryClient } from '../api/query-client.ts';
import { sessionQueries, signInPath } from '../api/session.ts';
import { routes, worksSignedOut } from '../routes.tsx';

const router = createBrowserRouter(routes);

// The session ended on the server: ask for sign-in and come back to the same place. What was typed is kept as a draft.
whenSignedOut(() => {
  queryClient.setQueryData(sessionQueries.current().queryKey, null);
  const { location } = router.state;
  if (!worksSignedOut(location.pathname)) void router.navigate(signInPath(location));
});

export function App() {
  return (
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  );
}
