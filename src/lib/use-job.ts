import { useEffect, useState } from "react";
import { queryOptions, useQuery, useQueryClient } from "@tanstack/react-query";
import { getJob, getJobEvents, jobSchema } from "@shared/contract/jobs";
import type { Job } from "@shared/contract/jobs";
import { call, endpointAddress } from "./api-client";
import { parseJson } from "./api-error";

export const jobQuery = (id: string) =>
  queryOptions({ queryKey: ["jobs", id], queryFn: ({ signal }) => call(getJob, { params: { id }, signal }) });

export const hasEnded = (job: Job): boolean => job.state !== "queued" && job.state !== "running";

const pollEveryMs = 2000;

type WatchedJob = { job: Job | undefined; updatedAtMs: number };

/** A job as it goes on, by server-sent events; where those cannot be had it is asked for every two seconds. */
export const useJob = (id: string | null, onEnd?: (job: Job) => void): WatchedJob => {
  const queryClient = useQueryClient();
  const [isStreaming, setStreaming] = useState(false);
  const query = useQuery({
    ...jobQuery(id ?? ""),
    enabled: id !== null,
    staleTime: 0,
    refetchInterval: ({ state }) => (isStreaming || (state.data && hasEnded(state.data)) ? false : pollEveryMs),
  });
  const isOver = query.data ? hasEnded(query.data) : false;

  useEffect(() => {
    if (!id || isOver || typeof EventSource === "undefined") return;
    const source = new EventSource(endpointAddress(getJobEvents, { params: { id } }));
    source.onopen = () => setStreaming(true);
    source.onmessage = (event: MessageEvent<string>) => {
      const job = jobSchema.safeParse(parseJson(event.data));
      if (job.success) queryClient.setQueryData(jobQuery(id).queryKey, job.data);
    };
    source.onerror = () => setStreaming(false);
    return () => {
      source.close();
      setStreaming(false);
    };
  }, [id, isOver, queryClient]);

  const ended = query.data && isOver ? query.data : undefined;
  useEffect(() => {
    if (ended) onEnd?.(ended);
    // Told once per ending, however often the caller makes a new function.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [ended?.id, ended?.state]);
  return { job: query.data, updatedAtMs: query.dataUpdatedAt };
};
