import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import type { Extract } from "@shared/contract/extracts";
import type { ExtractLayout } from "@shared/contract/saved-layouts";
import { Button } from "@/components/ui/button";
import { QueryView } from "@/components/ui/query-view";
import { LoadingState } from "@/components/ui/skeleton";
import { usePermission } from "@/lib/session";
import { extractLayoutQuery } from "../../api/extract-layout";
import { layoutSentence } from "../../view/layout-words";
import { FileRows } from "./file-rows";
import { LayoutEditor } from "./layout-editor";
import { ReadRows } from "./read-rows";

/** How the file is read: in a line where nothing is asked, and to be set where it is. */
export const ReadingStep = ({ extract }: { extract: Extract }) => {
  const query = useQuery({ ...extractLayoutQuery(extract.id), enabled: extract.layout !== null });
  if (extract.layout === null) {
    return <p className="p-4 text-muted sm:p-5">How the file is read is worked out from its first rows, when it is checked.</p>;
  }
  return (
    <QueryView
      query={query}
      loading="Reading the first rows"
      failure="The file’s first rows could not be read"
      skeleton={
        <div className="p-5">
          <LoadingState label="Reading the first rows" />
        </div>
      }
    >
      {(start) => <Reading key={JSON.stringify(start.layout)} extract={extract} start={start} />}
    </QueryView>
  );
};

const Reading = ({ extract, start }: { extract: Extract; start: ExtractLayout }) => {
  const maySet = usePermission("extracts:write") && (extract.state === "checked" || extract.state === "unusable");
  const isAsked = maySet && !start.isConfirmed;
  const [isOpen, setOpen] = useState(false);
  if (isAsked) return <LayoutEditor extract={extract} start={start} />;
  if (isOpen && maySet) return <LayoutEditor extract={extract} start={start} onLeave={() => setOpen(false)} />;
  return (
    <div className="flex flex-col gap-5 p-4 sm:p-5">
      <div className="flex flex-wrap items-start justify-between gap-3">
        <p>
          {originSentence(start)} <span className="text-muted">{layoutSentence(start.layout)}.</span>
        </p>
        {maySet && (
          <Button size="small" onClick={() => setOpen(true)}>
            Read it another way
          </Button>
        )}
      </div>
      <FileRows layout={start.layout} preview={start.preview} />
      <ReadRows preview={start.preview} isBehind={false} />
    </div>
  );
};

const originSentence = ({ origin, saved, isConfirmed }: ExtractLayout): string => {
  if (origin === "own") return "The file is in our own form.";
  if (origin === "saved") return `Its columns are those of “${saved?.name ?? "a saved layout"}”, so it is read like it.`;
  if (origin === "chosen") return saved ? `It is read as set here, and kept as “${saved.name}”.` : "It is read as set for this file.";
  return isConfirmed ? "It is read as worked out from the file." : "How it is read was worked out from the file; a data admin has to say that it is right.";
};
