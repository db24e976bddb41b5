import { keepPreviousData, queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import type { Layout } from "@shared/contract/layouts";
import { getExtractLayout, previewLayout, putExtractLayout } from "@shared/contract/saved-layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import { call } from "@/lib/api-client";
import { extractQuery } from "./extract";
import { layoutsQuery } from "./layouts";

const extractLayoutKey = (id: string) => [...extractQuery(id).queryKey, "layout"];

/** How the file is read, with its first rows. */
export const extractLayoutQuery = (id: string) =>
  queryOptions({
    queryKey: extractLayoutKey(id),
    queryFn: ({ signal }) => call(getExtractLayout, { params: { id }, signal }),
  });

export const askPreview = (id: string, layout: Layout, signal?: AbortSignal): Promise<LayoutPreview> =>
  call(previewLayout, { params: { id }, body: { layout }, signal });

/** The first rows as another layout would read them; the last answer stays until the next is there. */
export const layoutPreviewQuery = (id: string, layout: Layout) =>
  queryOptions({
    queryKey: [...extractLayoutKey(id), "preview", layout],
    queryFn: ({ signal }) => askPreview(id, layout, signal),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
    gcTime: 60_000,
  });

/** Reads the file by a layout from now on; the check begins anew. */
export const useLayoutChoice = (id: string) => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ layout, saveAs }: { layout: Layout; saveAs?: string }) =>
      call(putExtractLayout, { params: { id }, body: { layout, saveAs } }),
    onSuccess: () =>
      Promise.all(
        [extractQuery(id).queryKey, layoutsQuery().queryKey, ["extracts"]].map((queryKey) => queryClient.invalidateQueries({ queryKey })),
      ),
  });
};
