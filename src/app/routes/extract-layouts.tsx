import { useQuery } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { LoadingState } from "@/components/ui/skeleton";
import { layoutsQuery } from "@/features/extracts/api/layouts";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { LayoutList } from "@/features/extracts/components/layouts/layout-list";
import { usePermission } from "@/lib/session";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(layoutsQuery());
  return null;
};

export const ExtractLayoutsRoute = () => {
  const query = useQuery(layoutsQuery());
  const mayChange = usePermission("extracts:write");
  return (
    <>
      <ExtractsViews />
      <PageHeader title="Saved layouts" facts={["How the files of each source are read; a file that fits one is recognised by itself"]} />
      <Sheet flush>
        <QueryView
          query={query}
          loading="Reading the layouts"
          failure="The layouts could not be read"
          skeleton={
            <div className="p-5">
              <LoadingState label="Reading the layouts" rows={3} />
            </div>
          }
          isEmpty={(layouts) => layouts.length === 0}
          empty={
            <EmptyState title="No layout is saved yet">
              A file that is not in our own form needs to be told how it is read. On its page, under How it is read, tick that next
              week’s file is read the same way: the layout then stands here, and is used by itself.
            </EmptyState>
          }
        >
          {(layouts) => <LayoutList layouts={layouts} mayChange={mayChange} />}
        </QueryView>
      </Sheet>
    </>
  );
};
