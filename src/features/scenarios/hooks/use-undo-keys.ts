import { useEffect } from "react";

type UndoKeys = { undo: () => void; redo: () => void };

const isTyping = (target: EventTarget | null) =>
  target instanceof HTMLTextAreaElement || (target instanceof HTMLInputElement && target.matches(":read-write"));

/** Ctrl or Cmd with Z undoes, with Shift or Y redoes; a field being typed in keeps its own undo. */
export function useUndoKeys({ undo, redo }: UndoKeys): void {
  useEffect(() => {
    const listen = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || isTyping(event.target)) return;
      const key = event.key.toLowerCase();
      if (key !== "z" && key !== "y") return;
      event.preventDefault();
      if (key === "y" || event.shiftKey) redo();
      else undo();
    };
    window.addEventListener("keydown", listen);
    return () => window.removeEventListener("keydown", listen);
  }, [undo, redo]);
}
