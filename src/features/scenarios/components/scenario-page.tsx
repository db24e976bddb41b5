import { keepPreviousData, useQuery } from "@tanstack/react-query";
import type { Scenario } from "@shared/contract/scenarios";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { LinkButton } from "@/components/ui/link-button";
import { LoadingState } from "@/components/ui/skeleton";
import { ApiError } from "@/lib/api-error";
import { paths } from "@/lib/paths";
import { planningContextQuery } from "../api/planning-context";
import { scenarioQuery } from "../api/scenario";
import { ScenarioBench } from "./scenario-bench";

/** A saved scenario with all that is needed to work on it. */
export const ScenarioPage = ({ scenarioId }: { scenarioId: string }) => {
  const scenario = useQuery(scenarioQuery(scenarioId));
  if (scenario.isPending) return <LoadingState label="Opening the scenario" rows={8} />;
  if (scenario.error instanceof ApiError && scenario.error.status === 404) {
    return (
      <EmptyState
        heading="h1"
        title="There is no such scenario"
        action={<LinkButton to={paths.scenarios.href()}>Go to the scenarios</LinkButton>}
      >
        It was deleted, or the link has lost a part on its way.
      </EmptyState>
    );
  }
  if (scenario.isError) {
    return <ErrorState error={scenario.error} title="The scenario could not be opened." onRetry={() => void scenario.refetch()} />;
  }
  return <WithContext key={scenarioId} scenario={scenario.data} />;
};

const WithContext = ({ scenario }: { scenario: Scenario }) => {
  // Where the plan takes another model, what it had stays on the page until the other has come.
  const context = useQuery({ ...planningContextQuery(scenario), placeholderData: keepPreviousData });
  if (context.isPending) return <LoadingState label="Reading models and past weeks" rows={8} />;
  if (context.isError) {
    return <ErrorState error={context.error} title="What the scenario is predicted from could not be read." onRetry={() => void context.refetch()} />;
  }
  if (context.data.fits.length === 0) {
    return (
      <EmptyState
        title="None of these stores has a model"
        action={<LinkButton to={paths.drivers.href({ product: scenario.product })}>Go to the drivers</LinkButton>}
      >
        A plan is predicted by models of past weeks. Fit one for this product first. {context.data.notes.join(" ")}
      </EmptyState>
    );
  }
  return <ScenarioBench scenario={scenario} context={context.data} />;
};
