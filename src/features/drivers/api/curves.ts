import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { getModelCurves } from "@shared/contract/drivers";
import { call } from "@/lib/api-client";

type CurvesOf = { modelId: string; store: string; level: number };

/** Every driver's curve of one store. The one before stays on the screen until the next has come. */
export const curvesQuery = ({ modelId, store, level }: CurvesOf) =>
  queryOptions({
    queryKey: ["curves", modelId, store, level],
    queryFn: ({ signal }) =>
      call(getModelCurves, { params: { id: modelId }, query: { store, level, points: 121 }, signal }),
    staleTime: Infinity,
    placeholderData: keepPreviousData,
  });
