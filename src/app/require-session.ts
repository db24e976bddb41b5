import type { QueryClient } from "@tanstack/react-query";
import { redirect } from "react-router-dom";
import type { LoaderFunctionArgs } from "react-router-dom";
import { chainQuery } from "@/lib/chain";
import { paths } from "@/lib/paths";
import { sessionQuery } from "@/lib/session";

/** Pages inside the shell are for people signed in: others go to sign in and come back to the same address. */
export const requireSession =
  (queryClient: QueryClient) =>
  async ({ request }: LoaderFunctionArgs) => {
    const session = await queryClient.ensureQueryData(sessionQuery());
    const { pathname, search } = new URL(request.url);
    if (!session) throw redirect(paths.signIn.href(`${pathname}${search}`));
    if (session.person.mustChangePassword && pathname !== paths.password.path) throw redirect(paths.password.href());
    await queryClient.ensureQueryData(chainQuery());
    return null;
  };
