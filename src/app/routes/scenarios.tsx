import type { QueryClient } from "@tanstack/react-query";
import { LinkButton } from "@/components/ui/link-button";
import { PageHeader } from "@/components/ui/page-header";
import { scenariosQuery } from "@/features/scenarios/api/scenarios-list";
import { ScenarioList } from "@/features/scenarios/components/scenario-list";
import { productsQuery } from "@/lib/catalogue";
import { paths } from "@/lib/paths";
import { usePermission } from "@/lib/session";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchInfiniteQuery(scenariosQuery());
  void queryClient.prefetchQuery(productsQuery());
  return null;
};

export const ScenariosRoute = () => (
  <>
    <PageHeader
      title="Scenarios"
      facts={["What happens if: prices and promotions tried before anyone commits"]}
      actions={
        usePermission("scenarios:write") && (
          <LinkButton tone="primary" to={paths.newScenario.href()}>
            New scenario
          </LinkButton>
        )
      }
    />
    <ScenarioList />
  </>
);
