import { isRouteErrorResponse, useRevalidator, useRouteError } from "react-router-dom";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { LinkButton } from "@/components/ui/link-button";
import { Sheet } from "@/components/ui/sheet";
import { ApiError } from "@/lib/api-error";
import { paths } from "@/lib/paths";

const statusOf = (error: unknown): number | undefined =>
  error instanceof ApiError || isRouteErrorResponse(error) ? error.status : undefined;

const titleOf = (status: number | undefined): string => {
  if (status === 0) return "The server is out of reach";
  if (status === 403) return "This page is not open to you";
  if (status === 404) return "There is nothing at this address";
  return "This page could not be shown";
};

/** A page that broke, by what broke it: not found, not allowed, out of reach, or our own mistake. */
export const RouteError = ({ inShell = false }: { inShell?: boolean }) => {
  const error = useRouteError();
  const { revalidate } = useRevalidator();
  const status = statusOf(error);
  const body =
    status === 404 ? (
      <EmptyState
        heading="h1"
        title={titleOf(404)}
        action={<LinkButton to={paths.home.href()}>Go to the start</LinkButton>}
      >
        It may have been removed, or the link has lost a part on its way.
      </EmptyState>
    ) : (
      <ErrorState heading="h1" title={titleOf(status)} error={error} onRetry={() => void revalidate()} />
    );
  return inShell ? <Sheet>{body}</Sheet> : <main className="mx-auto max-w-2xl p-6 pt-24">{body}</main>;
};
