import { FileUp } from "lucide-react";
import { useId, useState } from "react";
import type { DragEvent } from "react";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Extract } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { SelectField } from "@/components/ui/select-field";
import { Sheet } from "@/components/ui/sheet";
import { buttonStyle } from "@/components/ui/button-style";
import { classNames } from "@/lib/class-names";
import { formatBytes } from "@/lib/format/bytes";
import { kindFromName, kindNames } from "../view/extract-state";
import { uploadProblem } from "../view/upload-problem";
import { useUploadExtract } from "../api/upload-extract";
import { ColumnGuide } from "./column-guide";
import { UploadProgress } from "./upload-progress";

const kindChoices = (Object.keys(kindNames) as ExtractKind[]).map((value) => ({ value, label: kindNames[value] }));

type UploadPanelProps = { limitBytes?: number; onUploaded: (extract: Extract) => void };

/** Takes a file by drop or choice, asks what it holds, sends it and shows how far it is. */
export const UploadPanel = ({ limitBytes, onUploaded }: UploadPanelProps) => {
  const inputId = useId();
  const [file, setFile] = useState<File | null>(null);
  const [kind, setKind] = useState<ExtractKind>("sales");
  const [sent, setSent] = useState<{ bytes: number; atMs: number } | null>(null);
  const [stop, setStop] = useState<AbortController | null>(null);
  const [isOver, setOver] = useState(false);
  const upload = useUploadExtract();

  const take = (chosen: File | undefined) => {
    if (!chosen) return;
    upload.reset();
    setFile(chosen);
    setKind(kindFromName(chosen.name));
  };
  const send = () => {
    if (!file) return;
    const controller = new AbortController();
    setStop(controller);
    setSent({ bytes: 0, atMs: Date.now() });
    upload.mutate(
      { file, kind, signal: controller.signal, onProgress: ({ bytes }) => setSent({ bytes, atMs: Date.now() }) },
      { onSuccess: onUploaded },
    );
  };
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    take(event.dataTransfer.files[0]);
  };
  const tooLarge = file !== null && limitBytes !== undefined && file.size > limitBytes;
  const problem = tooLarge
    ? `This file has ${formatBytes(file.size)}; at most ${formatBytes(limitBytes)} are taken. Split it by weeks, or compress it as .csv.gz.`
    : upload.isError
      ? uploadProblem(upload.error)
      : null;

  return (
    <Sheet
      aria-label="Upload an extract"
      className={classNames("border-dashed border-control transition-colors", isOver && "bg-accent-soft")}
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={drop}
    >
      {upload.isPending && file && sent ? (
        <UploadProgress file={file} sent={sent} onStop={() => stop?.abort()} />
      ) : (
        <div className="flex flex-wrap items-center gap-x-6 gap-y-4">
          <FileUp className="size-7 shrink-0 text-muted max-sm:hidden" strokeWidth={1.5} aria-hidden="true" />
          <div className="min-w-48 flex-1">
            <p className="font-semibold">{file ? file.name : "Drop a file here"}</p>
            <p className="text-sm text-muted">
              {file
                ? formatBytes(file.size)
                : "CSV with a header row, .csv or .csv.gz. It is kept unchanged and checked line by line."}
            </p>
          </div>
          <div className="flex flex-wrap items-end gap-3">
            {file && (
              <SelectField
                label="It holds"
                choices={kindChoices}
                value={kind}
                onChange={setKind}
                fieldClassName="w-40"
              />
            )}
            <label
              htmlFor={inputId}
              className={buttonStyle({
                className:
                  "cursor-pointer has-focus-visible:outline-2 has-focus-visible:outline-offset-2 has-focus-visible:outline-accent",
              })}
            >
              {file ? "Choose another" : "Choose a file"}
              <input
                id={inputId}
                type="file"
                accept=".csv,.gz,text/csv,application/gzip"
                className="sr-only"
                onChange={(event) => {
                  take(event.target.files?.[0]);
                  // The same file, corrected, must count as a new choice.
                  event.target.value = "";
                }}
              />
            </label>
            {file && (
              <Button tone="primary" onClick={send} disabled={tooLarge}>
                Upload
              </Button>
            )}
          </div>
        </div>
      )}
      {problem && (
        <div className="mt-4">
          <Notice tone="danger" role="alert">
            {problem}
          </Notice>
        </div>
      )}
      {!upload.isPending && <ColumnGuide key={kind} kind={kind} />}
    </Sheet>
  );
};
