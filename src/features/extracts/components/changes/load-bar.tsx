import { useState } from "react";
import type { Extract, ExtractChanges } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { Notice } from "@/components/ui/notice";
import { countOf } from "@/lib/format/number";
import { useExtractAction } from "../../api/extract-actions";
import { changesNothing } from "../../view/changes-summary";
import { problemSentence } from "../../view/problem-sentence";

/** The button that loads; where the changes are unusual, only after a person has said that they looked. */
export const LoadBar = ({ extract, changes }: { extract: Extract; changes: ExtractChanges }) => {
  const [hasLooked, setLooked] = useState(false);
  const action = useExtractAction(extract.id);
  const { secondLook } = changes;
  const isUnusual = secondLook.length > 0;
  const load = () => action.mutate({ name: "load", secondLook: isUnusual && hasLooked });
  return (
    <div className="flex flex-col gap-4 border-t border-hairline p-4 sm:p-5">
      {isUnusual && (
        <Notice tone="caution">
          <h3 className="font-semibold">Please look a second time</h3>
          <ul className="mt-1 list-disc pl-5">
            {secondLook.map((reason) => (
              <li key={reason}>{reason}</li>
            ))}
          </ul>
          <div className="mt-3 text-ink">
            <Checkbox
              label="I have looked at this, and it is right"
              checked={hasLooked}
              onChange={(event) => setLooked(event.target.checked)}
            />
          </div>
        </Notice>
      )}
      {action.isError && (
        <Notice tone="danger" role="alert">
          {problemSentence(action.error)}
        </Notice>
      )}
      <div className="flex flex-wrap items-center gap-4">
        <Button
          tone={changesNothing(changes) ? "secondary" : "primary"}
          onClick={load}
          busy={action.isPending}
          disabled={isUnusual && !hasLooked}
        >
          Load {countOf(extract.rows?.usable ?? 0, "row")}
        </Button>
        <p className="text-sm text-muted">
          {changesNothing(changes)
            ? "There is no need to: only the file would be marked as loaded."
            : "All of them or none. It can be withdrawn again."}
        </p>
      </div>
    </div>
  );
};
