import { useCallback, useEffect, useRef, useState } from "react";
import { useQueryClient } from "@tanstack/react-query";
import type { Scenario } from "@shared/contract/scenarios";
import { ApiError } from "@/lib/api-error";
import { saveScenario } from "../api/save-scenario";
import { scenarioQuery } from "../api/scenario";
import { draftOf } from "../view/scenario-draft";
import type { ScenarioEdit } from "../view/scenario-draft";

export type SaveState =
  | { kind: "saved"; at: string }
  | { kind: "waiting" }
  | { kind: "saving" }
  | { kind: "failed"; detail: string }
  | { kind: "conflict" };

const patienceMs = 800;

type Asked = { scenario: Scenario; edit: ScenarioEdit; enabled: boolean };

/** Whether the server said that it kept nothing. */
const isRefusal = (error: unknown) => error instanceof ApiError && error.status >= 400 && error.status < 500;

/**
 * Saves an edit a moment after the last change, one save at a time, each over the version the one before made. When
 * someone else saved meanwhile it stops and says so: which of the two stays is for a person to choose.
 */
export function useAutosave({ scenario, edit, enabled }: Asked) {
  const queryClient = useQueryClient();
  const [state, setState] = useState<SaveState>({ kind: "saved", at: scenario.updatedAt });
  /** What the server holds; null where that is not known. */
  const saved = useRef<ScenarioEdit | null>(edit);
  const savedAt = useRef(scenario.updatedAt);
  const version = useRef(scenario.version);
  const isSaving = useRef(false);
  const latest = useRef(edit);
  useEffect(() => {
    latest.current = edit;
  }, [edit]);

  const save = useCallback(async () => {
    if (isSaving.current) return;
    isSaving.current = true;
    try {
      while (saved.current !== latest.current) {
        const sent = latest.current;
        setState({ kind: "saving" });
        const answer = await saveScenario({ id: scenario.id, version: version.current, draft: draftOf(scenario, sent) });
        version.current = answer.version;
        saved.current = sent;
        savedAt.current = answer.updatedAt;
        queryClient.setQueryData(scenarioQuery(scenario.id).queryKey, answer);
        void queryClient.invalidateQueries({ queryKey: ["scenarios"] });
        setState({ kind: "saved", at: answer.updatedAt });
      }
    } catch (error) {
      const isConflict = error instanceof ApiError && error.status === 412;
      // Without an answer it may have been saved all the same: an edit that is undone then is sent again.
      if (!isConflict && !isRefusal(error)) saved.current = null;
      const detail = error instanceof ApiError ? error.detail : "Something went wrong in this page.";
      setState(isConflict ? { kind: "conflict" } : { kind: "failed", detail });
    } finally {
      isSaving.current = false;
    }
  }, [queryClient, scenario]);

  const stopped = state.kind === "conflict";
  useEffect(() => {
    if (!enabled || stopped) return;
    if (edit === saved.current) {
      // Undone before it was sent, or after it was refused: nothing is left to save.
      setState((now) => (now.kind === "waiting" || now.kind === "failed" ? { kind: "saved", at: savedAt.current } : now));
      return;
    }
    setState((now) => (now.kind === "saving" ? now : { kind: "waiting" }));
    const timer = setTimeout(() => void save(), patienceMs);
    return () => clearTimeout(timer);
  }, [edit, enabled, stopped, save]);

  return {
    state,
    retry: save,
    /** Keeps what this page shows, over the version someone else saved. */
    saveOver: useCallback((theirs: Scenario) => {
      version.current = theirs.version;
      return save();
    }, [save]),
    /** Takes what someone else saved: it counts as saved here. */
    accept: useCallback((theirs: Scenario, taken: ScenarioEdit) => {
      version.current = theirs.version;
      saved.current = taken;
      savedAt.current = theirs.updatedAt;
      latest.current = taken;
      queryClient.setQueryData(scenarioQuery(theirs.id).queryKey, theirs);
      setState({ kind: "saved", at: theirs.updatedAt });
    }, [queryClient]),
  };
}
