import { MutationCache, QueryCache, QueryClient } from "@tanstack/react-query";
import { ApiError } from "./api-error";
import { sessionQuery } from "./session";

/** Asking again helps only where the server was out of reach or broke; a refusal stays a refusal. */
export const shouldRetry = (failureCount: number, error: unknown): boolean => {
  if (failureCount >= 2) return false;
  return !(error instanceof ApiError) || error.status === 0 || error.status >= 502;
};

/** A session that has run out is noticed by whichever request meets it first; the shell then asks to sign in again. */
export const createQueryClient = (): QueryClient => {
  const noteExpiry = (error: unknown) => {
    if (!(error instanceof ApiError) || error.status !== 401) return;
    if (client.getQueryData(sessionQuery().queryKey)) client.setQueryData(sessionQuery().queryKey, null);
  };
  const client = new QueryClient({
    queryCache: new QueryCache({ onError: noteExpiry }),
    mutationCache: new MutationCache({ onError: noteExpiry }),
    defaultOptions: {
      queries: { staleTime: 30_000, retry: shouldRetry, refetchOnWindowFocus: true },
      mutations: { retry: false },
    },
  });
  return client;
};
