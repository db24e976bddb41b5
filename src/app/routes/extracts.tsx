import { useInfiniteQuery } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { useNavigate } from "react-router-dom";
import { Button } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { PageHeader } from "@/components/ui/page-header";
import { Sheet } from "@/components/ui/sheet";
import { LoadingState } from "@/components/ui/skeleton";
import { extractsQuery } from "@/features/extracts/api/list-extracts";
import { loadedWeeksQuery } from "@/features/extracts/api/loaded-weeks";
import { ExtractList } from "@/features/extracts/components/extract-list";
import { LoadedWeeksLine } from "@/features/extracts/components/loaded-weeks-line";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { UploadPanel } from "@/features/extracts/components/upload/upload-panel";
import { useChain } from "@/lib/chain";
import { paths } from "@/lib/paths";
import { usePermission } from "@/lib/session";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchInfiniteQuery(extractsQuery());
  void queryClient.prefetchQuery(loadedWeeksQuery());
  return null;
};

export const ExtractsRoute = () => {
  const mayUpload = usePermission("extracts:write");
  const limitBytes = useChain()?.uploadLimitBytes;
  const navigate = useNavigate();
  const query = useInfiniteQuery(extractsQuery());
  const extracts = query.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <>
      <ExtractsViews />
      <PageHeader title="Extracts" facts={["Files as they arrived: stores, products, weekly sales, events and temperatures"]} />
      <div className="flex flex-col gap-5">
        {mayUpload && (
          <UploadPanel
            limitBytes={limitBytes}
            onArrived={(extract) => void navigate(paths.extract.href(extract.id))}
          />
        )}
        <Sheet flush>
          {query.isPending && (
            <div className="p-5">
              <LoadingState label="Reading the extracts" />
            </div>
          )}
          {query.isError && !query.data && (
            <ErrorState
              title="The extracts could not be read"
              error={query.error}
              onRetry={() => void query.refetch()}
            />
          )}
          {query.data && extracts.length === 0 && <NoExtracts mayUpload={mayUpload} />}
          {extracts.length > 0 && (
            <>
              <LoadedWeeksLine />
              <ExtractList extracts={extracts} />
            </>
          )}
          {query.hasNextPage && (
            <div className="border-t border-hairline p-3 text-center">
              <Button size="small" onClick={() => void query.fetchNextPage()} busy={query.isFetchingNextPage}>
                Show older ones
              </Button>
            </div>
          )}
        </Sheet>
      </div>
    </>
  );
};

const NoExtracts = ({ mayUpload }: { mayUpload: boolean }) => (
  <EmptyState title="No extract has arrived yet">
    {mayUpload
      ? "Begin with a stores file and a products file, then weekly sales. Each is checked before anything is loaded."
      : "Your data admin uploads the stores, the products and the weekly sales. Once they are loaded, drivers can be learnt."}
  </EmptyState>
);
