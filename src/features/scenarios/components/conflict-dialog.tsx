import { useQuery } from "@tanstack/react-query";
import type { Scenario } from "@shared/contract/scenarios";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { ErrorState } from "@/components/ui/error-state";
import { LoadingState } from "@/components/ui/skeleton";
import { useChainFormat } from "@/lib/format/chain-format";
import { theirScenarioQuery } from "../api/scenario";

type ConflictDialogProps = { scenarioId: string; onKeepMine: (theirs: Scenario) => void; onTakeTheirs: (theirs: Scenario) => void };

/** Two people edited the same scenario: both versions still exist, and a person says which one stays. */
export const ConflictDialog = ({ scenarioId, onKeepMine, onTakeTheirs }: ConflictDialogProps) => {
  const format = useChainFormat();
  const theirs = useQuery(theirScenarioQuery(scenarioId));
  const known = theirs.data;
  return (
    <Dialog
      open
      // Closing without a choice would leave unsaved work that nothing speaks of.
      onClose={() => undefined}
      title="Someone else saved this scenario meanwhile"
      actions={
        known && (
          <>
            <Button onClick={() => onTakeTheirs(known)}>Take theirs, drop my changes</Button>
            <Button tone="primary" onClick={() => onKeepMine(known)}>
              Keep mine, replace theirs
            </Button>
          </>
        )
      }
    >
      {theirs.isPending && <LoadingState label="Reading the other version" rows={2} />}
      {theirs.isError && <ErrorState error={theirs.error} title="The other version could not be read." onRetry={() => void theirs.refetch()} />}
      {known && (
        <p>
          {known.updatedBy.name} saved it on {format.moment(known.updatedAt)}. Your changes since you opened it are still on this page.
          Nothing is lost until you choose.
        </p>
      )}
    </Dialog>
  );
};
