import type { QueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { useNavigate, useSearchParams } from "react-router-dom";
import { PageHeader } from "@/components/ui/page-header";
import { NewScenario } from "@/features/scenarios/components/new-scenario-form";
import { productsQuery, storesQuery } from "@/lib/catalogue";
import { paths } from "@/lib/paths";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(productsQuery());
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const NewScenarioRoute = () => {
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const [today] = useState(() => new Date().toISOString().slice(0, 10));
  const preset = { product: search.get("product") ?? undefined, store: search.get("store") ?? undefined };
  return (
    <div className="mx-auto max-w-4xl">
      <PageHeader title="New scenario" facts={["Prices and promotions are set on its own page next"]} />
      <NewScenario today={today} preset={preset} onCreated={(scenario) => void navigate(paths.scenario.href(scenario.id), { replace: true })} />
    </div>
  );
};
