import { ProgressBar } from "@/components/ui/progress-bar";
import { formatBytes } from "@/lib/format/bytes";
import { useTimeLeft } from "@/lib/use-time-left";
import type { QueuedUpload } from "../../api/upload-queue";

/** How much of a file has gone up. The form around it adds a few bytes, which must not show as more than all. */
export const SendingProgress = ({ upload: { file, sent } }: { upload: QueuedUpload }) => {
  const bytes = Math.min(sent.bytes, file.size);
  const left = useTimeLeft({ done: bytes, total: file.size, atMs: sent.atMs });
  const isSent = bytes >= file.size;
  return (
    <ProgressBar
      label={isSent ? "Being put away" : "Going up"}
      share={file.size === 0 ? null : bytes / file.size}
      note={isSent ? "Sent; the server is putting it away" : `${formatBytes(bytes)} of ${formatBytes(file.size)}`}
      secondsLeft={isSent ? null : left}
    />
  );
};
