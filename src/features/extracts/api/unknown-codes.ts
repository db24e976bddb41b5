import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import type { BodyOf } from "@shared/contract/endpoint";
import { createUnknownCodes, getUnknownCodes } from "@shared/contract/unknown-codes";
import { call } from "@/lib/api-client";
import { extractQuery } from "./extract";

/** Stores and products of the file that the catalogue lacks. */
export const unknownCodesQuery = (id: string) =>
  queryOptions({
    queryKey: [...extractQuery(id).queryKey, "unknown-codes"],
    queryFn: ({ signal }) => call(getUnknownCodes, { params: { id }, signal }),
  });

export type CodesToEnter = BodyOf<typeof createUnknownCodes>;

/** Enters them into the catalogue; the check begins anew by itself. */
export const useEnterCodes = (id: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (body: CodesToEnter) => call(createUnknownCodes, { params: { id }, body }),
    onSuccess: () =>
      Promise.all(
        [extractQuery(id).queryKey, ["stores"], ["products"], ["extracts"]].map((queryKey) => queryClient.invalidateQueries({ queryKey })),
      ),
  });
};
