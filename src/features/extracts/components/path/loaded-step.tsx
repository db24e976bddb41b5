import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import type { Extract } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { useStatusLine } from "@/components/ui/status-line";
import { TextLink } from "@/components/ui/text-link";
import { useChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { useExtractAction } from "../../api/extract-actions";
import { extractChangesQuery } from "../../api/extract-changes";
import { withdrawalSentence } from "../../view/changes-summary";
import { problemSentence } from "../../view/problem-sentence";

/** When it was loaded, what follows from it, and the way back. */
export const LoadedStep = ({ extract }: { extract: Extract }) => {
  const format = useChainFormat();
  const { state, kind, firstWeek, lastWeek } = extract;
  const weeks = firstWeek && lastWeek ? format.weekSpan(firstWeek, lastWeek) : null;
  if (state !== "loaded" && state !== "withdrawn") {
    return <p className="p-4 text-muted sm:p-5">Nothing of this file counts yet. It is loaded as a whole, or not at all.</p>;
  }
  return (
    <div className="flex flex-wrap items-end justify-between gap-4 p-4 sm:p-5">
      <div className="max-w-3xl">
        {state === "loaded" ? (
          <p>
            Loaded {format.moment(extract.loadedAt)}
            {weeks && `: ${weeks}`}.{" "}
            {kind === "sales" ? (
              <>
                Its weeks stand in <TextLink to={paths.coverage.href()}>Coverage</TextLink>. Curves take them in when a planner or
                category manager fits anew under <TextLink to={paths.drivers.href()}>Drivers</TextLink>.
              </>
            ) : (
              "The catalogue has it now. Extracts that waited for it can be checked again."
            )}
          </p>
        ) : (
          <p>
            Loaded {format.moment(extract.loadedAt)}, withdrawn {format.moment(extract.withdrawnAt)}. The file is kept; to load its
            rows again, upload it again. <TextLink to={paths.coverage.href()}>Coverage</TextLink> shows its weeks as withdrawn where
            nothing else is loaded.
          </p>
        )}
      </div>
      {extract.may.withdraw && <Withdrawal extract={extract} />}
    </div>
  );
};

const Withdrawal = ({ extract }: { extract: Extract }) => {
  const [isAsking, setAsking] = useState(false);
  const action = useExtractAction(extract.id);
  const changes = useQuery({ ...extractChangesQuery(extract.id), enabled: isAsking });
  const status = useStatusLine();
  const start = () => {
    setAsking(false);
    action.mutate({ name: "withdraw" }, { onError: (error) => status.failed(problemSentence(error)) });
  };
  return (
    <>
      <Button tone="danger" onClick={() => setAsking(true)} busy={action.isPending}>
        Withdraw
      </Button>
      <Dialog
        open={isAsking}
        onClose={() => setAsking(false)}
        title="Withdraw this extract?"
        actions={
          <>
            <Button onClick={() => setAsking(false)}>Keep it loaded</Button>
            <Button tone="danger" onClick={start}>
              Withdraw
            </Button>
          </>
        }
      >
        <div className="flex flex-col gap-2">
          <p>{withdrawalSentence(changes.data)}</p>
          <p className="text-muted">
            All of it goes back, or nothing: if a later file changed the same rows, that one must be withdrawn first, and you are
            told which. Models already fitted stay as they are until they are fitted anew.
          </p>
        </div>
      </Dialog>
    </>
  );
};
