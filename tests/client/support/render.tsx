import { QueryClientProvider } from "@tanstack/react-query";
import { cleanup, render } from "@testing-library/react";
import type { ReactNode } from "react";
import { MemoryRouter } from "react-router-dom";
import { afterEach, vi } from "vitest";
import { StatusLineProvider } from "@/components/ui/status-line";
import { createQueryClient } from "@/lib/query-client";

afterEach(cleanup);

// jsdom has no CSS.escape, which the keyboard stand-in needs to walk radio buttons.
vi.stubGlobal("CSS", { escape: (text: string) => text.replace(/[^\w-]/g, "\\$&") });

// jsdom has the dialog element, but cannot open it.
HTMLDialogElement.prototype.showModal = function () { this.open = true; };
HTMLDialogElement.prototype.close = function () { this.open = false; };

/** Draws a part of the interface inside what surrounds every page. */
export const renderInPage = (part: ReactNode, { at = "/" }: { at?: string } = {}) => {
  const queryClient = createQueryClient();
  queryClient.setDefaultOptions({ queries: { retry: false } });
  const result = render(
    <QueryClientProvider client={queryClient}>
      <StatusLineProvider>
        <MemoryRouter initialEntries={[at]}>{part}</MemoryRouter>
      </StatusLineProvider>
    </QueryClientProvider>,
  );
  return { ...result, queryClient };
};
