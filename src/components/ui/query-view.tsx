import type { UseQueryResult } from "@tanstack/react-query";
import type { ReactNode } from "react";
import { ErrorState } from "./error-state";
import { LoadingState } from "./skeleton";

type QueryViewProps<Data> = {
  query: UseQueryResult<Data>;
  /** "Reading the extracts" */
  loading: string;
  /** "The extracts could not be read" */
  failure: string;
  /** Whether there is nothing to show; then `empty` stands in its place. */
  isEmpty?: (data: Data) => boolean;
  empty?: ReactNode;
  /** In place of the plain outline. */
  skeleton?: ReactNode;
  children: (data: Data) => ReactNode;
};

/** A view's four states. Data once shown stays while it is asked for again, also when that fails. */
export const QueryView = <Data,>(props: QueryViewProps<Data>) => {
  const { query, loading, failure, isEmpty, empty, skeleton, children } = props;
  if (query.data !== undefined) return isEmpty?.(query.data) ? empty : children(query.data);
  if (query.isError) return <ErrorState title={failure} error={query.error} onRetry={() => void query.refetch()} />;
  return skeleton ?? <LoadingState label={loading} />;
};
