import { CircleAlert, CircleCheck, RotateCw, X } from "lucide-react";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { Button } from "@/components/ui/button";
import { IconButton } from "@/components/ui/icon-button";
import { SelectField } from "@/components/ui/select-field";
import { TextLink } from "@/components/ui/text-link";
import { formatBytes } from "@/lib/format/bytes";
import { paths } from "@/lib/paths";
import type { QueuedUpload } from "../../api/upload-queue";
import { useUploadQueue } from "../../api/uploads";
import { kindNames } from "../../view/extract-state";
import { SendingProgress } from "./sending-progress";

const kindChoices = (Object.keys(kindNames) as ExtractKind[]).map((value) => ({ value, label: kindNames[value] }));

/** One file on its way: what it holds, how far it is, what stands in its way. */
export const UploadRow = ({ upload }: { upload: QueuedUpload }) => {
  const queue = useUploadQueue();
  const { id, file, kind, state, refusal } = upload;
  const isFree = state === "chosen" || state === "failed";
  return (
    <li className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-4 gap-y-2 py-3 sm:grid-cols-[minmax(0,1fr)_10rem_minmax(0,1.2fr)_auto]">
      <div className="min-w-0">
        <p className="truncate font-medium" title={file.name}>
          {file.name}
        </p>
        <p className="text-sm text-muted">{formatBytes(file.size)}</p>
      </div>
      <div className="max-sm:order-3 max-sm:col-span-2">
        {refusal === null && isFree ? (
          <SelectField
            label={`What ${file.name} holds`}
            hideLabel
            choices={kindChoices}
            value={kind}
            onChange={(chosen) => queue.setKind(id, chosen)}
          />
        ) : (
          refusal === null && <span className="text-muted">{kindNames[kind]}</span>
        )}
      </div>
      <div className="min-w-0 max-sm:order-4 max-sm:col-span-2">
        <Progress upload={upload} />
      </div>
      <div className="flex justify-end gap-1">
        {state === "failed" && (
          <Button size="small" onClick={() => queue.retry(id)}>
            <RotateCw aria-hidden="true" /> Try again
          </Button>
        )}
        {state === "sending" ? (
          <Button size="small" onClick={() => queue.stop(id)}>
            Stop
          </Button>
        ) : (
          <IconButton label={`Take ${file.name} off this list`} onClick={() => queue.remove(id)}>
            <X />
          </IconButton>
        )}
      </div>
    </li>
  );
};

const lineStyle = "flex items-start gap-2 text-sm [&_svg]:mt-0.5 [&_svg]:size-4 [&_svg]:shrink-0";

const Progress = ({ upload }: { upload: QueuedUpload }) => {
  const { state, refusal, problem, extract } = upload;
  if (refusal ?? (state === "failed" ? problem : null)) {
    return (
      <p role="alert" className={`${lineStyle} text-danger`}>
        <CircleAlert aria-hidden="true" /> {refusal ?? problem}
      </p>
    );
  }
  if (state === "sending") return <SendingProgress upload={upload} />;
  if (state === "waiting") return <p className="text-sm text-muted">Waiting for its turn</p>;
  if (state === "arrived" && extract) {
    return (
      <p className={`${lineStyle} text-good`}>
        <CircleCheck aria-hidden="true" />
        <span>
          Arrived, and kept unchanged. <TextLink to={paths.extract.href(extract.id)}>See its check</TextLink>
        </span>
      </p>
    );
  }
  return null;
};
