import { Button } from "@/components/ui/button";
import { ProgressBar } from "@/components/ui/progress-bar";
import { formatBytes } from "@/lib/format/bytes";
import { useTimeLeft } from "@/lib/use-time-left";

type UploadProgressProps = { file: File; sent: { bytes: number; atMs: number }; onStop: () => void };

/** How much of the file has gone up. The form around it adds a few bytes, which must not show as more than all. */
export const UploadProgress = ({ file, sent, onStop }: UploadProgressProps) => {
  const bytes = Math.min(sent.bytes, file.size);
  const left = useTimeLeft({ done: bytes, total: file.size, atMs: sent.atMs });
  const isSent = bytes >= file.size;
  return (
    <div className="flex items-center gap-6">
      <div className="flex-1">
        <ProgressBar
          label={`Uploading ${file.name}`}
          share={file.size === 0 ? null : bytes / file.size}
          note={isSent ? "Sent; the server is putting it away" : `${formatBytes(bytes)} of ${formatBytes(file.size)}`}
          secondsLeft={isSent ? null : left}
        />
      </div>
      <Button onClick={onStop}>Stop</Button>
    </div>
  );
};
