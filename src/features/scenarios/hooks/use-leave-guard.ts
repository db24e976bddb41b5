import { useEffect } from "react";
import { useBlocker } from "react-router-dom";

/** Asks before unsaved work is left behind, by a link, the back button or closing the tab. */
export function useLeaveGuard(isUnsaved: boolean) {
  const blocker = useBlocker(({ currentLocation, nextLocation }) => isUnsaved && currentLocation.pathname !== nextLocation.pathname);
  useEffect(() => {
    if (!isUnsaved) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", ask);
    return () => window.removeEventListener("beforeunload", ask);
  }, [isUnsaved]);
  return blocker;
}
