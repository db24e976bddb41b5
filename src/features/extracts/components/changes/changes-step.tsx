import { useQuery } from "@tanstack/react-query";
import type { Extract } from "@shared/contract/extracts";
import { QueryView } from "@/components/ui/query-view";
import { Skeleton } from "@/components/ui/skeleton";
import { extractChangesQuery } from "../../api/extract-changes";
import { changesSentence } from "../../view/changes-summary";
import { ChangesTable } from "./changes-table";
import { LoadBar } from "./load-bar";

const hasChanges = ({ state, rows }: Extract) =>
  rows !== null && rows.usable > 0 && (state === "checked" || state === "loading" || state === "loaded");

/** What loading does, week by week, and the button that does it. */
export const ChangesStep = ({ extract }: { extract: Extract }) => {
  const query = useQuery({ ...extractChangesQuery(extract.id), enabled: hasChanges(extract) });
  if (extract.state === "withdrawn") {
    return <p className="p-4 text-muted sm:p-5">What it changed has been put back, so there is nothing to compare any more.</p>;
  }
  if (!hasChanges(extract)) {
    return <p className="p-4 text-muted sm:p-5">Rows are compared with what is loaded once they have been checked.</p>;
  }
  return (
    <QueryView
      query={query}
      loading="Comparing with what is there"
      failure="The comparison could not be made"
      skeleton={
        <div className="p-5" role="status" aria-label="Comparing with what is there">
          <Skeleton className="h-24" />
        </div>
      }
    >
      {(changes) => (
        <>
          <p className="p-4 sm:px-5">{changesSentence(changes, extract.state === "loaded")}</p>
          {changes.weeks.length > 0 && (
            <div className="border-t border-hairline">
              <ChangesTable weeks={changes.weeks} />
            </div>
          )}
          {extract.state === "checked" && (extract.may.load ? <LoadBar key={extract.checkedAt} extract={extract} changes={changes} /> : <NoLoad extract={extract} />)}
        </>
      )}
    </QueryView>
  );
};

/** The server says who may; the page says why not. */
const NoLoad = ({ extract }: { extract: Extract }) => (
  <p className="border-t border-hairline p-4 text-muted sm:p-5">
    {extract.layout?.isConfirmed === false
      ? "It can be loaded once someone has said, under How it is read, that the file is read rightly."
      : "A data admin can load it."}
  </p>
);
