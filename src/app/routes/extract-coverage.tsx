import { useQuery } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { useNavigate, useSearchParams } from "react-router-dom";
import type { LoaderFunctionArgs } from "react-router-dom";
import { EmptyState } from "@/components/ui/empty-state";
import { LinkButton } from "@/components/ui/link-button";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { LoadingState } from "@/components/ui/skeleton";
import { coverageQuery } from "@/features/extracts/api/coverage";
import { CoverageView } from "@/features/extracts/components/coverage/coverage-view";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { coverageSpans } from "@/features/extracts/view/coverage-sentence";
import type { CoverageSpan } from "@/features/extracts/view/coverage-sentence";
import { paths } from "@/lib/paths";
import { useFilters } from "@/lib/use-filters";

/** The address holds the weeks and the choice of stores. */
const readView = (search: URLSearchParams): { until: string | null; span: CoverageSpan; wantsLooksOnly: boolean } => ({
  until: /^\d{4}-\d\d-\d\d$/.exec(search.get("until") ?? "")?.[0] ?? null,
  span: coverageSpans.find(({ value }) => value === search.get("weeks"))?.value ?? "52",
  wantsLooksOnly: search.get("show") === "looks",
});

export const loaderFor =
  (queryClient: QueryClient) =>
  ({ request }: LoaderFunctionArgs) => {
    const { until, span } = readView(new URL(request.url).searchParams);
    void queryClient.prefetchQuery(coverageQuery({ until, weeks: Number(span) }));
    return null;
  };

export const ExtractCoverageRoute = () => {
  const [search] = useSearchParams();
  const { set } = useFilters(["until", "weeks", "show"]);
  const navigate = useNavigate();
  const { until, span, wantsLooksOnly } = readView(search);
  const query = useQuery(coverageQuery({ until, weeks: Number(span) }));
  return (
    <>
      <ExtractsViews />
      <PageHeader title="Coverage" facts={["Which weeks of which stores are loaded; a cell leads to its file"]} />
      <Sheet>
        <QueryView
          query={query}
          loading="Reading what is loaded"
          failure="What is loaded could not be read"
          skeleton={<LoadingState label="Reading what is loaded" rows={10} />}
          isEmpty={({ stores, weeks }) => stores.length === 0 || weeks.length === 0}
          empty={
            <EmptyState title="Nothing to cover yet" action={<LinkButton to={paths.extracts.href()}>Bring files in</LinkButton>}>
              Here stands, store by week, what is loaded and what is missing. Load the stores first, then weekly sales.
            </EmptyState>
          }
        >
          {(coverage) => (
            <CoverageView
              coverage={coverage}
              span={span}
              onSpan={(next) => set({ weeks: next })}
              onUntil={(week) => set({ until: week })}
              isNewest={until === null}
              wantsLooksOnly={wantsLooksOnly}
              onLooksOnly={(only) => set({ show: only ? "looks" : null })}
              onOpenExtract={(id) => void navigate(paths.extract.href(id))}
            />
          )}
        </QueryView>
      </Sheet>
    </>
  );
};
