import { useQueryClient } from "@tanstack/react-query";
import { useState } from "react";
import { Button } from "@/components/ui/button";
import { JobProgress } from "@/components/jobs/job-progress";
import { useStatusLine } from "@/components/ui/status-line";
import { ApiError } from "@/lib/api-error";
import { hasEnded, useJob } from "@/lib/use-job";
import { useFitModel } from "../api/fit-model";
import { modelsQuery } from "../api/models";

type FitButtonProps = {
  product: string;
  label: string;
  tone?: "primary" | "secondary";
  /** A fit that goes on already. */ jobId?: string | null;
};

/** Fits the product in all its stores, in the background, and shows how far that is. */
export const FitButton = ({ product, label, tone = "secondary", jobId = null }: FitButtonProps) => {
  const [started, setStarted] = useState<string | null>(null);
  const queryClient = useQueryClient();
  const status = useStatusLine();
  const fit = useFitModel(product);
  const { job, updatedAtMs } = useJob(started ?? jobId, (ended) => {
    void queryClient.invalidateQueries({ queryKey: modelsQuery(product).queryKey });
    if (!started) return;
    if (ended.state === "succeeded") status.done("The fit is done.");
    if (ended.state === "failed")
      status.failed(ended.error?.detail ?? "The fit broke down. The model in use stays as it was.");
  });
  if (job && !hasEnded(job)) {
    return (
      <div className="w-64">
        <JobProgress key={job.id} job={job} updatedAtMs={updatedAtMs} label="Fitting" />
      </div>
    );
  }
  return (
    <Button
      tone={tone}
      busy={fit.isPending}
      onClick={() =>
        fit.mutate(undefined, {
          onSuccess: setStarted,
          onError: (error) =>
            status.failed(error instanceof ApiError ? error.detail : "The fit did not start. Try again."),
        })
      }
    >
      {label}
    </Button>
  );
};
