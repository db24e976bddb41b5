import { useChainFormat } from "@/lib/format/chain-format";
import type { SaveState } from "../hooks/use-autosave";

/** Says in the page's head whether what is shown is saved. */
export const SaveLine = ({ state, onRetry }: { state: SaveState; onRetry: () => void }) => {
  const format = useChainFormat();
  if (state.kind === "failed") {
    return (
      <span role="alert" className="text-danger">
        not saved: {state.detail}{" "}
        <button type="button" className="font-medium underline underline-offset-2" onClick={onRetry}>
          Try again
        </button>
      </span>
    );
  }
  const texts = { waiting: "unsaved changes", saving: "saving …", conflict: "not saved: changed by someone else", saved: "" };
  return <span role="status">{state.kind === "saved" ? `saved ${format.timeOfDay(state.at)}` : texts[state.kind]}</span>;
};
