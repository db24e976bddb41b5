import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import type { Scenario } from "@shared/contract/scenarios";
import { EmptyState } from "@/components/ui/empty-state";
import { LeaveGuard } from "@/components/ui/leave-guard";
import { productsQuery } from "@/lib/catalogue";
import { useChain } from "@/lib/chain";
import type { PlanningContext } from "../api/planning-context";
import { useAutosave } from "../hooks/use-autosave";
import { usePrediction } from "../hooks/use-prediction";
import { useScenarioEdit } from "../hooks/use-scenario-edit";
import { useUndoKeys } from "../hooks/use-undo-keys";
import { editOf } from "../view/scenario-draft";
import { BenchLanes } from "./bench-lanes";
import { Cautions } from "./cautions";
import { ConflictDialog } from "./conflict-dialog";
import { ScenarioHead } from "./scenario-head";
import { SumSheet } from "./sum-sheet";
import { WeekSheet } from "./week-sheet";

/** Where a plan is made: lanes at the left, their sum at the right, the weeks below. Prediction never waits for the server. */
export const ScenarioBench = ({ scenario, context }: { scenario: Scenario; context: PlanningContext }) => {
  const chainLevel = useChain()?.intervalLevel ?? 0.8;
  const [chosenLevel, setLevel] = useState<number | null>(null);
  const level = chosenLevel ?? chainLevel;
  const [week, setWeek] = useState(scenario.weeks.first);
  const editing = useScenarioEdit(scenario);
  const { edit } = editing;
  const saving = useAutosave({ scenario, edit, enabled: scenario.may.edit });
  useUndoKeys({ undo: editing.undo, redo: editing.redo });
  const figures = usePrediction({ context, changes: editing.cells, fixedCost: edit.fixedCost, level });
  const products = useQuery(productsQuery());
  const product = useMemo(() => products.data?.find((one) => one.code === scenario.product), [products.data, scenario.product]);

  const head = (
    <>
      <ScenarioHead
        scenario={scenario}
        product={product}
        editing={editing}
        saving={{ state: saving.state, retry: () => void saving.retry() }}
        level={level}
        levels={[...new Set([chainLevel, 0.8, 0.95])].sort()}
        onLevel={setLevel}
      />
      <LeaveGuard isUnsaved={saving.state.kind !== "saved"} lost="the last changes">
        The last changes to this scenario are not saved yet. It saves itself within a second, unless the server cannot be reached.
      </LeaveGuard>
    </>
  );
  if (!figures) {
    return (
      <>
        {head}
        <EmptyState title="Nothing can be predicted yet">
          {context.notes.join(" ") || "The regular price of these stores and weeks is not known: give it in the catalogue, or load weeks that have it."}
        </EmptyState>
      </>
    );
  }
  return (
    <>
      {head}
      <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-5 xl:grid-cols-[minmax(0,1fr)_23.5rem]">
        <div className="flex min-w-0 flex-col gap-5">
          <BenchLanes scenario={scenario} figures={figures} level={level} week={week} onWeek={setWeek} editing={editing} />
          <WeekSheet figures={figures} context={context} week={week} onWeek={setWeek} />
        </div>
        <SumSheet
          scenario={scenario}
          figures={figures}
          fixedCost={edit.fixedCost}
          onFixedCost={(fixedCost) => editing.change({ fixedCost })}
          cautions={<Cautions figures={figures} context={context} firstWeek={scenario.weeks.first} />}
        />
      </div>
      {saving.state.kind === "conflict" && (
        <ConflictDialog
          scenarioId={scenario.id}
          onKeepMine={(theirs) => void saving.saveOver(theirs)}
          onTakeTheirs={(theirs) => {
            const taken = editOf(theirs);
            saving.accept(theirs, taken);
            editing.replace(taken);
          }}
        />
      )}
    </>
  );
};
