import type { QueryClient } from "@tanstack/react-query";
import { redirect } from "react-router-dom";
import { paths } from "@/lib/paths";
import { sessionQuery } from "@/lib/session";

/** Everyone starts where their week does: a data admin with the extracts, the others with the drivers. */
export const loaderFor = (queryClient: QueryClient) => async () => {
  const session = await queryClient.ensureQueryData(sessionQuery());
  const bringsData = session?.permissions.includes("extracts:write") ?? false;
  return redirect(bringsData ? paths.extracts.href() : paths.drivers.href());
};
