import { useEffect, useState } from "react";
import { useQuery, useQueryClient, queryOptions } from "@tanstack/react-query";
import { getJob, getJobEvents, jobSchema } from "@shared/contract/jobs";
import type { Job } from "@shared/contract/jobs";
import { call, endpointAddress } from "./api-client";
import { parseJson } from "./api-error";

export const jobQuery = (id: string) =>
  queryOptions({ queryKey: ["jobs", id], queryFn: ({ signal }) => call(getJob, { params: { id }, signal }) });

export const hasEnded = (job: Job): boolean => job.state !== "queued" && job.state !== "running";

/** A job as it goes on, by server-sent events; where those cannot be had it is asked for every two seconds. */
export const useJob = (id: string | null, onEnd?: (job: Job) => void): Job | undefined => {
  const queryClient = useQueryClient();
  const [streaming, setStreaming] = useState(true);
  const query = useQuery({
    ...jobQuery(id ?? ""),
    enabled: id !== null,
    refetchInterval: ({ state }) => (streaming || (state.data && hasEnded(state.data)) ? false : 2000),
  });
  const isOver = query.data ? hasEnded(query.data) : false;

  useEffect(() => {
    if (!id || isOver || typeof EventSource === "undefined") return;
    const source = new EventSource(endpointAddress(getJobEvents, { params: { id } }));
    const receive = (event: MessageEvent<string>) => {
      const job = jobSchema.safeParse(parseJson(event.data));
      if (job.success) queryClient.setQueryData(jobQuery(id).queryKey, job.data);
    };
    source.onopen = () => setStreaming(true);
    source.onmessage = receive;
    source.addEventListener("progress", receive);
    source.addEventListener("job", receive);
    source.onerror = () => setStreaming(false);
    return () => source.close();
  }, [id, isOver, queryClient]);

  const ended = query.data && isOver ? query.data : undefined;
  useEffect(() => {
    if (ended) onEnd?.(ended);
    // Told once per ending, however often the caller makes a new function.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [ended?.id, ended?.state]);
  return query.data;
};
