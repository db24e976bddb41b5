import { QueryClientProvider } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { render } from "@testing-library/react";
import type { ReactNode } from "react";
import { createMemoryRouter, RouterProvider } from "react-router-dom";
import type { RouteObject } from "react-router-dom";
import { StatusLineProvider } from "@/components/ui/status-line";
import { createQueryClient } from "@/lib/query-client";
import "./render";

type Options = { at?: string; queryClient?: QueryClient };

/** Draws routes at an address, with a router that can lead on and hold people back who have not saved. */
export const renderRoutes = (routes: RouteObject[], { at = "/", queryClient = askingOnce() }: Options = {}) => {
  const router = createMemoryRouter(routes, { initialEntries: [at] });
  render(
    <QueryClientProvider client={queryClient}>
      <StatusLineProvider>
        <RouterProvider router={router} />
      </StatusLineProvider>
    </QueryClientProvider>,
  );
  return { router };
};

/** Draws one page at an address, whichever it is. */
export const renderRouted = (page: ReactNode, { at }: { at?: string } = {}) => renderRoutes([{ path: "*", element: page }], { at });

const askingOnce = (): QueryClient => {
  const queryClient = createQueryClient();
  queryClient.setDefaultOptions({ queries: { retry: false } });
  return queryClient;
};
