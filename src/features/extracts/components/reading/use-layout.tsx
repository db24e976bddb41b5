import { useState } from "react";
import type { Extract } from "@shared/contract/extracts";
import type { ExtractLayout } from "@shared/contract/saved-layouts";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { Notice } from "@/components/ui/notice";
import { TextField } from "@/components/ui/text-field";
import { useLayoutChoice } from "../../api/extract-layout";
import { suggestName } from "../../view/layout-name";
import { problemSentence } from "../../view/problem-sentence";
import type { LayoutDraft } from "./use-layout-draft";

type UseLayoutProps = { extract: Extract; start: ExtractLayout; editing: LayoutDraft; onLeave?: () => void };

/** Takes the layout for this file, and, where it is ticked, for the next ones of its source. */
export const UseLayout = ({ extract, start, editing, onLeave }: UseLayoutProps) => {
  const { draft, preview, problems, isChanged, isBehind } = editing;
  const choice = useLayoutChoice(extract.id);
  const [keeps, setKeeps] = useState(start.origin === "proposed" || start.saved !== null);
  const [name, setName] = useState(start.saved?.name ?? suggestName(extract.fileName));
  const isReady = preview.missing.length === 0 && problems.length === 0 && !isBehind && (!keeps || name.trim() !== "");
  return (
    <div className="flex flex-col gap-4 border-t border-hairline pt-5">
      <div className="grid max-w-2xl gap-3 sm:grid-cols-2 sm:items-start">
        <Checkbox
          label="Read this source’s next files the same way"
          hint="A file with the same columns is then recognised by itself."
          checked={keeps}
          onChange={(event) => setKeeps(event.target.checked)}
        />
        {keeps && (
          <TextField
            label="Name of the source"
            value={name}
            maxLength={80}
            onChange={(event) => setName(event.target.value)}
            hint={start.saved?.name === name.trim() ? "Takes the place of the layout of that name." : undefined}
          />
        )}
      </div>
      {choice.isError && (
        <Notice tone="danger" role="alert">
          {problemSentence(choice.error)}
        </Notice>
      )}
      <div className="flex flex-wrap items-center gap-3">
        <Button
          tone="primary"
          busy={choice.isPending}
          disabled={!isReady}
          onClick={() => choice.mutate({ layout: draft, saveAs: keeps ? name.trim() : undefined })}
        >
          {keeps ? `Use this and save it as “${name.trim() || "…"}”` : "Use this"}
        </Button>
        {isChanged && <Button onClick={editing.reset}>Back to how it was</Button>}
        {onLeave && !isChanged && <Button onClick={onLeave}>Leave it as it is</Button>}
        <p className="text-sm text-muted">The kept file is checked again by it; it need not be uploaded again.</p>
      </div>
    </div>
  );
};
