import { useMutation, useQueryClient } from "@tanstack/react-query";
import { uploadExtract } from "@shared/contract/extracts";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { upload } from "@/lib/upload";
import type { UploadOptions } from "@/lib/upload";
import { extractQuery } from "./extract";
import { extractsQuery } from "./list-extracts";

type Upload = { file: File; kind: ExtractKind } & Pick<UploadOptions, "onProgress" | "signal">;

export const useUploadExtract = () => {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ file, kind, onProgress, signal }: Upload) => {
      const form = new FormData();
      // The kind goes first, so that the server knows it before the file's bytes begin.
      form.set("kind", kind);
      form.set("file", file);
      return upload(uploadExtract, { form, onProgress, signal });
    },
    onSuccess: (extract) => {
      queryClient.setQueryData(extractQuery(extract.id).queryKey, extract);
      return queryClient.invalidateQueries({ queryKey: extractsQuery().queryKey });
    },
  });
};
