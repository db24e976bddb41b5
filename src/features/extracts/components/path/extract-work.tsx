import type { Job } from "@shared/contract/jobs";
import type { Extract } from "@shared/contract/extracts";
import { JobProgress } from "@/components/jobs/job-progress";
import { Notice } from "@/components/ui/notice";
import { Sheet } from "@/components/ui/sheet";
import { useStatusLine } from "@/components/ui/status-line";
import { useJob } from "@/lib/use-job";
import { useRefreshExtract } from "../../api/extract-actions";
import { isInWork } from "../../view/extract-state";

const labels = { received: "Checking the rows", checking: "Checking the rows", loading: "Loading, all or nothing" };

const labelOf = (state: Extract["state"]) =>
  state === "received" || state === "checking" || state === "loading" ? labels[state] : "Working";

/** The job that works on the extract, while it does, and what went wrong when it broke down. */
export const ExtractWork = ({ extract }: { extract: Extract }) => {
  const refresh = useRefreshExtract(extract.id);
  const status = useStatusLine();
  const isWatched = isInWork(extract);
  const tell = (ended: Job) => {
    void refresh();
    if (isWatched && ended.state === "succeeded" && extract.state === "loading")
      status.done(`${extract.fileName} is loaded.`);
  };
  const { job, updatedAtMs } = useJob(extract.jobId, tell);
  const isRunning = job !== undefined && (job.state === "queued" || job.state === "running");
  if (isRunning) {
    return (
      <Sheet className="mb-4">
        <JobProgress key={job.id} job={job} updatedAtMs={updatedAtMs} label={labelOf(extract.state)} />
        <p className="mt-2 text-sm text-muted">You can leave this page: it goes on, and this page finds it again.</p>
      </Sheet>
    );
  }
  // What made the file unusable stands at its step; a job that broke down is said here.
  if (!extract.failure || extract.state === "unusable" || extract.state === "received") return null;
  return (
    <div className="mb-4">
      <Notice tone="danger" role="alert">
        <strong className="font-semibold">The last step broke down; nothing was changed. </strong>
        {extract.failure.detail}
      </Notice>
    </div>
  );
};
