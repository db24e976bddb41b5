import { useQueryClient } from "@tanstack/react-query";
import { createContext, useContext, useEffect, useState, useSyncExternalStore } from "react";
import type { ReactNode } from "react";
import { uploadExtract } from "@shared/contract/extracts";
import { upload } from "@/lib/upload";
import { isUnderWay } from "../view/uploads-summary";
import { extractQuery } from "./extract";
import { extractsQuery } from "./list-extracts";
import { UploadQueue } from "./upload-queue";
import type { QueuedUpload, SendFile } from "./upload-queue";

const sendFile: SendFile = ({ file, kind, signal, onProgress }) => {
  const form = new FormData();
  // The kind goes first, so that the server knows it before the file's bytes begin.
  form.set("kind", kind);
  form.set("file", file);
  return upload(uploadExtract, { form, onProgress, signal });
};

const UploadsContext = createContext<UploadQueue | null>(null);

/** Keeps uploads going above the pages; ends them when its person leaves. Closing the tab meanwhile asks first. */
export const UploadsProvider = ({ children }: { children: ReactNode }) => {
  const queryClient = useQueryClient();
  const [queue] = useState(
    () =>
      new UploadQueue(async (file) => {
        const extract = await sendFile(file);
        queryClient.setQueryData(extractQuery(extract.id).queryKey, extract);
        void queryClient.invalidateQueries({ queryKey: extractsQuery().queryKey });
        return extract;
      }),
  );
  useEffect(() => {
    const ask = (event: BeforeUnloadEvent) => {
      if (queue.snapshot().some(isUnderWay)) event.preventDefault();
    };
    window.addEventListener("beforeunload", ask);
    return () => {
      window.removeEventListener("beforeunload", ask);
      queue.clear();
    };
  }, [queue]);
  return <UploadsContext.Provider value={queue}>{children}</UploadsContext.Provider>;
};

export const useUploadQueue = (): UploadQueue => {
  const queue = useContext(UploadsContext);
  if (!queue) throw new Error("Uploads are kept by UploadsProvider, which stands around all pages.");
  return queue;
};

export const useUploads = (): readonly QueuedUpload[] => {
  const queue = useUploadQueue();
  return useSyncExternalStore(queue.subscribe, queue.snapshot);
};
