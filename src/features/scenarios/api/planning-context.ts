import { queryOptions } from "@tanstack/react-query";
import type { ResponseOf } from "@shared/contract/endpoint";
import { getPlanningContext } from "@shared/contract/scenarios";
import type { Scenario } from "@shared/contract/scenarios";
import { call } from "@/lib/api-client";

export type PlanningContext = ResponseOf<typeof getPlanningContext>;

/** All the page needs to predict by itself: base weeks, fitted models, the weeks before. */
export const planningContextQuery = ({ product, stores, weeks, modelId }: Pick<Scenario, "product" | "stores" | "weeks" | "modelId">) =>
  queryOptions({
    queryKey: ["planning-context", product, stores.join(","), weeks.first, weeks.last, modelId],
    queryFn: ({ signal }) =>
      call(getPlanningContext, { query: { product, stores: stores.join(","), ...weeks, model: modelId }, signal }),
    // A scenario keeps its model, and what was sold before the plan is not news while one drags.
    staleTime: Infinity,
    refetchOnWindowFocus: false,
  });
