import type { QueryClient } from "@tanstack/react-query";
import type { LoaderFunctionArgs } from "react-router-dom";
import { useParams } from "react-router-dom";
import { scenarioQuery } from "@/features/scenarios/api/scenario";
import { ScenarioPage } from "@/features/scenarios/components/scenario-page";
import { productsQuery } from "@/lib/catalogue";

export const loaderFor = (queryClient: QueryClient) => ({ params }: LoaderFunctionArgs) => {
  if (params.scenarioId) void queryClient.prefetchQuery(scenarioQuery(params.scenarioId));
  void queryClient.prefetchQuery(productsQuery());
  return null;
};

export const ScenarioRoute = () => {
  const { scenarioId = "" } = useParams();
  return <ScenarioPage scenarioId={scenarioId} />;
};
