import { useQuery } from "@tanstack/react-query";
import type { Scenario } from "@shared/contract/scenarios";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { ErrorState } from "@/components/ui/error-state";
import { LoadingState } from "@/components/ui/skeleton";
import { useChainFormat } from "@/lib/format/chain-format";
import { call } from "@/lib/api-client";
import { getScenario } from "@shared/contract/scenarios";

type ConflictDialogProps = { scenarioId: string; onKeepMine: (theirs: Scenario) => void; onTakeTheirs: (theirs: Scenario) => void };

/** Two people edited the same scenario: both versions still exist, and a person says which one stays. */
export const ConflictDialog = ({ scenarioId, onKeepMine, onTakeTheirs }: ConflictDialogProps) => {
  const format = useChainFormat();
  // Their version is asked for apart from the page's own, which must not change under the person's hands.
  const theirs = useQuery({
    queryKey: ["scenario", scenarioId, "theirs"],
    queryFn: ({ signal }) => call(getScenario, { params: { id: scenarioId }, signal }),
    staleTime: 0,
    gcTime: 0,
  });
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
