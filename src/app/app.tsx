import { QueryClientProvider } from "@tanstack/react-query";
import { useState } from "react";
import { RouterProvider } from "react-router-dom";
import { StatusLineProvider } from "@/components/ui/status-line";
import { createQueryClient } from "@/lib/query-client";
import { createRouter } from "./router";

export const App = () => {
  const [queryClient] = useState(createQueryClient);
  const [router] = useState(() => createRouter(queryClient));
  return (
    <QueryClientProvider client={queryClient}>
      <StatusLineProvider>
        <RouterProvider router={router} />
      </StatusLineProvider>
    </QueryClientProvider>
  );
};
