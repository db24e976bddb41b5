import type { QueryClient } from "@tanstack/react-query";
import { redirect } from "react-router-dom";
import { paths } from "@/lib/paths";
import { sessionQuery } from "@/lib/session";

/** Everyone starts where their week does: a data admin with the extracts, the others with the drivers. */
export const loaderFor = (queryClient: QueryClient) => async () => {
  const session = await queryClient.ensureQueryData(sessionQuery());
  // Loaders run side by side: without this the page people come back to would be the drivers, whoever signs in.
  if (!session) return redirect(paths.signIn.href());
  const bringsData = session.permissions.includes("extracts:write");
  return redirect(bringsData ? paths.extracts.href() : paths.drivers.href());
};
