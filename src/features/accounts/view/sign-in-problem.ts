import { ApiError } from "@/lib/api-error";
import { formatDuration } from "@/lib/format/date";

/** What to tell someone who could not sign in: never which of the two was wrong. */
export const signInProblem = (error: unknown): string => {
  if (!(error instanceof ApiError)) return "Something went wrong in this page. Reload it, then try again.";
  if (error.status === 401) return "That e-mail address and password do not go together.";
  if (error.status === 429) {
    const wait = error.retryAfterSeconds
      ? ` Try again in ${formatDuration(error.retryAfterSeconds)}.`
      : " Try again later.";
    return `Too many attempts.${wait}`;
  }
  if (error.status === 0) return error.detail;
  if (error.status >= 500) return `The server could not sign you in just now. Try again in a minute.${quote(error)}`;
  return error.detail;
};

const quote = (error: ApiError) => (error.requestId ? ` If it goes on, quote ${error.requestId}.` : "");
