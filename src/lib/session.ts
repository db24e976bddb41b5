import { queryOptions, useQuery } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { getSession } from "@shared/contract/accounts";
import type { Session } from "@shared/contract/accounts";
import type { Permission } from "@shared/contract/permissions";
import { call } from "./api-client";
import { ApiError } from "./api-error";

/** Who is signed in; null where nobody is, which is an answer and no failure. */
export const sessionQuery = () =>
  queryOptions({
    queryKey: ["session"],
    queryFn: async ({ signal }): Promise<Session | null> => {
      try {
        return await call(getSession, { signal });
      } catch (error) {
        if (error instanceof ApiError && error.status === 401) return null;
        throw error;
      }
    },
    staleTime: 60_000,
  });

/**
 * Whatever one person has read goes before another signs in. The session's own entry stays, because a cleared one
 * would no longer tell the shell of the change.
 */
export const forgetOthersData = (queryClient: QueryClient): void =>
  queryClient.removeQueries({ predicate: ({ queryKey }) => queryKey[0] !== sessionQuery().queryKey[0] });

/**
 * Set where a person signed out, and forgotten with the rest once someone signs in: a session that merely ended brings
 * its person back to the page they were on, but the next person starts at their own.
 */
export const signedOutKey = ["signed-out"] as const;

export const useSession = (): Session | null => useQuery(sessionQuery()).data ?? null;

/** What the person may do. Hiding a button is a courtesy: the server decides. */
export const usePermission = (permission: Permission): boolean =>
  useSession()?.permissions.includes(permission) ?? false;

const roleNames = {
  "data-admin": "Data admin",
  planner: "Planner",
  "category-manager": "Category manager",
  administrator: "Administrator",
} as const;

export const roleName = (role: keyof typeof roleNames): string => roleNames[role];

/** "Ingrid Kale" becomes "IK"; one word gives its first two letters. */
export const initialsOf = (name: string): string => {
  const words = name.trim().split(/\s+/);
  const letters = words.length > 1 ? `${words[0][0]}${words[words.length - 1][0]}` : words[0].slice(0, 2);
  return letters.toUpperCase();
};
