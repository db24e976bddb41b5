import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useEffect, useState } from "react";
import { layoutSchema } from "@shared/contract/layouts";
import type { Layout } from "@shared/contract/layouts";
import type { ExtractLayout } from "@shared/contract/saved-layouts";
import { askPreview, layoutPreviewQuery } from "../../api/extract-layout";
import { adoptColumns } from "../../view/layout-mapping";

const pauseMs = 300;

/** A value once it has rested for a moment. */
const useSettled = <Value>(value: Value): Value => {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), pauseMs);
    return () => clearTimeout(timer);
  }, [value]);
  return settled;
};

/** What decides which columns the file has. */
export type Writing = Partial<Pick<Layout, "encoding" | "separator" | "hasHeader" | "linesAbove">>;

const isSame = (one: Layout, other: Layout) => JSON.stringify(one) === JSON.stringify(other);

/** A layout being changed, with the file's first rows as it would read them. Nothing is kept before it is said so. */
export const useLayoutDraft = (extractId: string, start: ExtractLayout) => {
  const [draft, setDraft] = useState<Layout>(start.layout);
  const isChanged = !isSame(draft, start.layout);
  const problems = layoutSchema.safeParse(draft).error?.issues.map(({ message }) => message) ?? [];
  const queryClient = useQueryClient();
  const rested = useSettled(draft);
  // What has been read before is shown at once; anything else waits until the person pauses.
  const isKnown = queryClient.getQueryData(layoutPreviewQuery(extractId, draft).queryKey) !== undefined;
  const settled = isKnown ? draft : rested;
  const query = useQuery({
    ...layoutPreviewQuery(extractId, settled),
    enabled: !isSame(settled, start.layout) && layoutSchema.safeParse(settled).success,
  });
  /** Another writing finds other columns: they are asked for, and what is proposed for them is taken. */
  const rewrite = useMutation({
    mutationFn: async (writing: Writing) => {
      const bare: Layout = { ...draft, ...writing, theirColumns: [""], mapping: {} };
      const adopted = adoptColumns(bare, (await askPreview(extractId, bare)).fileColumns);
      await queryClient.prefetchQuery(layoutPreviewQuery(extractId, adopted));
      return adopted;
    },
    onSuccess: setDraft,
  });
  return {
    draft,
    change: setDraft,
    changePart: (part: Partial<Layout>) => setDraft((before) => ({ ...before, ...part })),
    rewrite: (writing: Writing) => rewrite.mutate(writing),
    reset: () => setDraft(start.layout),
    isChanged,
    problems,
    preview: isChanged && query.data ? query.data : start.preview,
    isBehind: rewrite.isPending || (isChanged && (query.isFetching || !isSame(settled, draft))),
    error: rewrite.error ?? (isChanged ? query.error : null),
  };
};

export type LayoutDraft = ReturnType<typeof useLayoutDraft>;
