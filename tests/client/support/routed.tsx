import { QueryClientProvider } from "@tanstack/react-query";
import { render } from "@testing-library/react";
import type { ReactNode } from "react";
import { createMemoryRouter, RouterProvider } from "react-router-dom";
import { StatusLineProvider } from "@/components/ui/status-line";
import { createQueryClient } from "@/lib/query-client";

/** Draws a page at an address, with a router that can hold people back who have not saved. */
export const renderRouted = (page: ReactNode, { at = "/" }: { at?: string } = {}) => {
  const queryClient = createQueryClient();
  queryClient.setDefaultOptions({ queries: { retry: false } });
  const router = createMemoryRouter([{ path: "*", element: page }], { initialEntries: [at] });
  render(
    <QueryClientProvider client={queryClient}>
      <StatusLineProvider>
        <RouterProvider router={router} />
      </StatusLineProvider>
    </QueryClientProvider>,
  );
  return { router };
};
