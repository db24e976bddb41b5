import { FileUp } from "lucide-react";
import { useCallback, useEffect, useId, useRef } from "react";
import type { Extract } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { buttonStyle } from "@/components/ui/button-style";
import { Sheet } from "@/components/ui/sheet";
import { formatBytes } from "@/lib/format/bytes";
import { countOf } from "@/lib/format/number";
import { inspectFiles } from "../../api/choose-files";
import type { QueuedUpload } from "../../api/upload-queue";
import { useUploadQueue, useUploads } from "../../api/uploads";
import { CheckGuide } from "./check-guide";
import { ColumnGuide } from "./column-guide";
import { PageDrop } from "./page-drop";
import { UploadRow } from "./upload-row";

type UploadPanelProps = {
  limitBytes?: number;
  /** Called when a file sent alone has arrived while this page is still looked at. */
  onArrived: (extract: Extract) => void;
};

const maySend = ({ state, refusal }: QueuedUpload) => state === "chosen" && refusal === null;

/** Takes files by drop or choice, asks what each holds, sends them and shows how far they are. */
export const UploadPanel = ({ limitBytes, onArrived }: UploadPanelProps) => {
  const queue = useUploadQueue();
  const uploads = useUploads();
  const sentAlone = useRef<string | null>(null);
  const take = useCallback(
    (files: readonly File[]) => void inspectFiles(files, limitBytes).then((chosen) => queue.add(chosen)),
    [queue, limitBytes],
  );
  useEffect(() => {
    const arrived = uploads.find(({ id, state }) => id === sentAlone.current && state === "arrived");
    if (!arrived?.extract) return;
    sentAlone.current = null;
    queue.remove(arrived.id);
    onArrived(arrived.extract);
  }, [uploads, queue, onArrived]);
  const start = () => {
    const ids = queue.start();
    sentAlone.current = ids.length === 1 && uploads.length === 1 ? ids[0] : null;
  };
  const ready = uploads.filter(maySend).length;
  const kind = uploads.find(maySend)?.kind ?? "sales";

  return (
    <Sheet aria-label="Upload extracts" className="border-dashed border-control">
      <PageDrop onFiles={take} />
      <div className="flex flex-wrap items-center gap-x-6 gap-y-4">
        <FileUp className="size-7 shrink-0 text-muted max-sm:hidden" strokeWidth={1.5} aria-hidden="true" />
        <div className="min-w-48 flex-1">
          <p className="font-semibold">Drop files anywhere on this page</p>
          <p className="text-sm text-muted">
            CSV as your systems write it, .csv or .csv.gz{limitBytes !== undefined && `, up to ${formatBytes(limitBytes)}`}. Each is
            kept unchanged and checked line by line; nothing is loaded before you say so.
          </p>
        </div>
        <div className="flex flex-wrap items-end gap-3">
          <FileChoice hasFiles={uploads.length > 0} onFiles={take} />
          {ready > 0 && (
            <Button tone="primary" onClick={start}>
              {ready === 1 ? "Upload" : `Upload ${countOf(ready, "file")}`}
            </Button>
          )}
        </div>
      </div>
      {uploads.length > 0 && (
        <ul aria-label="Files to upload" className="mt-4 divide-y divide-hairline border-t border-hairline">
          {uploads.map((upload) => (
            <UploadRow key={upload.id} upload={upload} />
          ))}
        </ul>
      )}
      <ColumnGuide key={kind} kind={kind} />
      <CheckGuide />
    </Sheet>
  );
};

const choiceStyle =
  "cursor-pointer has-focus-visible:outline-2 has-focus-visible:outline-offset-2 has-focus-visible:outline-accent";

const FileChoice = ({ hasFiles, onFiles }: { hasFiles: boolean; onFiles: (files: File[]) => void }) => {
  const inputId = useId();
  return (
    <label htmlFor={inputId} className={buttonStyle({ className: choiceStyle })}>
      {hasFiles ? "Choose more" : "Choose files"}
      <input
        id={inputId}
        type="file"
        multiple
        accept=".csv,.txt,.gz,text/csv,application/gzip"
        className="sr-only"
        onChange={(event) => {
          onFiles([...(event.target.files ?? [])]);
          // The same file, corrected, must count as a new choice.
          event.target.value = "";
        }}
      />
    </label>
  );
};
