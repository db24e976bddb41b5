import { ApiError } from "@/lib/api-error";
import { Button } from "./button";

type ErrorStateProps = {
  error: unknown;
  /** What could not be done, as a sentence: "The extracts could not be read." */
  title: string;
  onRetry?: () => void;
  /** "h1" where it is all the page has. */
  heading?: "h1" | "h2";
};

const detailOf = (error: unknown): string =>
  error instanceof ApiError ? error.detail : "Something went wrong in this page. Nothing you saved is lost.";

/** A view that could not be shown: what happened, the id to quote, and a way to try again. */
export const ErrorState = ({ error, title, onRetry, heading: Heading = "h2" }: ErrorStateProps) => {
  const requestId = error instanceof ApiError ? error.requestId : undefined;
  return (
    <div role="alert" className="flex flex-col items-center px-6 py-12 text-center">
      <Heading className="text-lg font-semibold">{title}</Heading>
      <p className="mt-1 max-w-md text-muted">{detailOf(error)}</p>
      {requestId && (
        <p className="mt-2 text-sm text-muted">
          If you report this, quote <code className="rounded-xs bg-hover px-1.5 py-0.5 text-ink">{requestId}</code>
        </p>
      )}
      {onRetry && (
        <Button className="mt-5" onClick={onRetry}>
          Try again
        </Button>
      )}
    </div>
  );
};
