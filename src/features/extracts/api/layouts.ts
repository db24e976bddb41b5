import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { deleteLayout, listLayouts, putLayout } from "@shared/contract/saved-layouts";
import type { SavedLayout } from "@shared/contract/saved-layouts";
import { call } from "@/lib/api-client";

const layoutsKey = ["layouts"];

/** Saved layouts by name. */
export const layoutsQuery = () =>
  queryOptions({ queryKey: layoutsKey, queryFn: async ({ signal }) => (await call(listLayouts, { signal })).items });

export const useRenameLayout = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ saved, name }: { saved: SavedLayout; name: string }) =>
      call(putLayout, { params: { id: saved.id }, body: { name, layout: saved.layout } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: layoutsKey }),
  });
};

export const useForgetLayout = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => call(deleteLayout, { params: { id } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: layoutsKey }),
  });
};
