import type { Job } from "@shared/contract/jobs";
import { ProgressBar } from "@/components/ui/progress-bar";
import { useTimeLeft } from "@/lib/use-time-left";

type JobProgressProps = { job: Job; updatedAtMs: number; label: string };

/** Work in the background: its own words for how far it is, and the time left at its pace. */
export const JobProgress = ({ job, updatedAtMs, label }: JobProgressProps) => {
  const { done, total, message } = job.progress;
  const left = useTimeLeft({ done, total, atMs: updatedAtMs });
  const isQueued = job.state === "queued";
  return (
    <ProgressBar
      label={label}
      share={isQueued ? 0 : total ? done / total : null}
      note={isQueued ? "Waiting for its turn" : message || "Starting"}
      secondsLeft={isQueued ? null : left}
    />
  );
};
