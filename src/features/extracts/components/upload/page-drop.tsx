import { FileDown } from "lucide-react";
import { useEffect, useState } from "react";

const holdsFiles = (event: DragEvent) => event.dataTransfer?.types.includes("Files") ?? false;

const hintStyle =
  "pointer-events-none fixed inset-3 z-40 flex flex-col items-center justify-center gap-3 rounded-lg border-2 border-dashed " +
  "border-accent bg-accent-soft/95 text-accent";

/** Makes the whole page a place to drop files on, and says so while they hover over it. */
export const PageDrop = ({ onFiles }: { onFiles: (files: File[]) => void }) => {
  const [isOver, setOver] = useState(false);
  useEffect(() => {
    const over = (event: DragEvent) => {
      if (!holdsFiles(event)) return;
      event.preventDefault();
      setOver(true);
    };
    // The pointer leaves the window, not merely one element for the next.
    const leave = (event: DragEvent) => event.relatedTarget === null && setOver(false);
    const drop = (event: DragEvent) => {
      if (!holdsFiles(event)) return;
      event.preventDefault();
      setOver(false);
      onFiles([...(event.dataTransfer?.files ?? [])]);
    };
    window.addEventListener("dragover", over);
    window.addEventListener("dragleave", leave);
    window.addEventListener("drop", drop);
    return () => {
      window.removeEventListener("dragover", over);
      window.removeEventListener("dragleave", leave);
      window.removeEventListener("drop", drop);
    };
  }, [onFiles]);
  if (!isOver) return null;
  return (
    <div className={hintStyle} role="status">
      <FileDown className="size-10" strokeWidth={1.5} aria-hidden="true" />
      <p className="text-xl font-semibold">Let go anywhere on this page</p>
      <p>Nothing is sent yet: you first say what each file holds.</p>
    </div>
  );
};
