import { useCallback, useReducer, useState } from "react";
import type { PlanCell, Scenario } from "@shared/contract/scenarios";
import { beginHistory, redo, stepTo, undo } from "../view/history";
import type { History } from "../view/history";
import { editOf } from "../view/scenario-draft";
import type { ScenarioEdit } from "../view/scenario-draft";

type Action = { kind: "step"; edit: ScenarioEdit } | { kind: "undo" } | { kind: "redo" } | { kind: "replace"; edit: ScenarioEdit };

const reduce = (history: History<ScenarioEdit>, action: Action): History<ScenarioEdit> => {
  if (action.kind === "step") return stepTo(history, action.edit);
  if (action.kind === "replace") return beginHistory(action.edit);
  return action.kind === "undo" ? undo(history) : redo(history);
};

/** A person's own draft of a scenario, with undo; `preview` shows what a drag would do before it is let go. */
export function useScenarioEdit(scenario: Scenario) {
  const [history, dispatch] = useReducer(reduce, scenario, (start) => beginHistory(editOf(start)));
  const [preview, setPreview] = useState<readonly PlanCell[] | null>(null);
  const { present } = history;
  const change = useCallback(
    (part: Partial<ScenarioEdit>) => {
      setPreview(null);
      dispatch({ kind: "step", edit: { ...present, ...part } });
    },
    [present],
  );
  return {
    edit: present,
    /** What the page shows now: the preview of a drag, or what is. */
    cells: preview ?? present.cells,
    change,
    preview: setPreview,
    replace: useCallback((edit: ScenarioEdit) => dispatch({ kind: "replace", edit }), []),
    undo: useCallback(() => dispatch({ kind: "undo" }), []),
    redo: useCallback(() => dispatch({ kind: "redo" }), []),
    canUndo: history.past.length > 0,
    canRedo: history.future.length > 0,
  };
}

export type ScenarioEditing = ReturnType<typeof useScenarioEdit>;
