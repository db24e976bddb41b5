import { useEffect } from "react";
import type { ReactNode } from "react";
import { useBlocker } from "react-router-dom";
import { Button } from "./button";
import { Dialog } from "./dialog";

type LeaveGuardProps = {
  isUnsaved: boolean;
  /** What leaving loses, as its button names it. */
  lost?: string;
  children: ReactNode;
};

/** Asks before unsaved work is left behind, by a link, the back button or closing the tab; the children say what would be lost. */
export const LeaveGuard = ({ isUnsaved, lost = "the changes", children }: LeaveGuardProps) => {
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) => isUnsaved && currentLocation.pathname !== nextLocation.pathname,
  );
  useEffect(() => {
    if (!isUnsaved) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", ask);
    return () => window.removeEventListener("beforeunload", ask);
  }, [isUnsaved]);
  return (
    <Dialog
      open={blocker.state === "blocked"}
      onClose={() => blocker.reset?.()}
      title="Leave without saving?"
      actions={
        <>
          <Button onClick={() => blocker.proceed?.()}>Leave, lose {lost}</Button>
          <Button tone="primary" onClick={() => blocker.reset?.()}>
            Stay
          </Button>
        </>
      }
    >
      {children}
    </Dialog>
  );
};
