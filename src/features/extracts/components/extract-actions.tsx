import { Download } from "lucide-react";
import { useState } from "react";
import { getExtractOriginal } from "@shared/contract/extracts";
import type { Extract } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { buttonStyle } from "@/components/ui/button-style";
import { Dialog } from "@/components/ui/dialog";
import { useStatusLine } from "@/components/ui/status-line";
import { ApiError } from "@/lib/api-error";
import { endpointAddress } from "@/lib/api-client";
import { countOf } from "@/lib/format/number";
import { useExtractAction } from "../api/extract-actions";
import type { ExtractAction } from "../api/extract-actions";

/** What may be done with an extract next; the server says what that is. */
export const ExtractActions = ({ extract }: { extract: Extract }) => {
  const [isAsking, setAsking] = useState(false);
  const action = useExtractAction(extract.id);
  const status = useStatusLine();
  const { may } = extract;
  const start = (name: ExtractAction) => {
    setAsking(false);
    action.mutate(name, {
      onError: (error) => status.failed(error instanceof ApiError ? error.detail : "That did not start. Try again."),
    });
  };
  const busyWith = (name: ExtractAction) => action.isPending && action.variables === name;
  return (
    <>
      <a
        href={endpointAddress(getExtractOriginal, { params: { id: extract.id } })}
        download={extract.fileName}
        className={buttonStyle()}
      >
        <Download aria-hidden="true" /> Original
      </a>
      {may.check && (
        <Button onClick={() => start("check")} busy={busyWith("check")}>
          Check again
        </Button>
      )}
      {may.withdraw && (
        <Button tone="danger" onClick={() => setAsking(true)} busy={busyWith("withdraw")}>
          Withdraw
        </Button>
      )}
      {may.load && (
        <Button tone="primary" onClick={() => start("load")} busy={busyWith("load")}>
          Load {countOf(extract.rows?.usable ?? 0, "row")}
        </Button>
      )}
      <Dialog
        open={isAsking}
        onClose={() => setAsking(false)}
        title="Withdraw this extract?"
        actions={
          <>
            <Button onClick={() => setAsking(false)}>Keep it loaded</Button>
            <Button tone="danger" onClick={() => start("withdraw")}>
              Withdraw
            </Button>
          </>
        }
      >
        <p>
          What its rows replaced is put back, and rows it added are taken out. The file itself is kept; to load its rows
          again, upload it again. Models already fitted stay as they are until they are fitted anew.
        </p>
      </Dialog>
    </>
  );
};
