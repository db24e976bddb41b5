import type { useBlocker } from "react-router-dom";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";

/** Stands between unsaved changes and the next page. */
export const LeaveDialog = ({ blocker }: { blocker: ReturnType<typeof useBlocker> }) => (
  <Dialog
    open={blocker.state === "blocked"}
    onClose={() => blocker.reset?.()}
    title="Leave without saving?"
    actions={
      <>
        <Button onClick={() => blocker.proceed?.()}>Leave, lose the last changes</Button>
        <Button tone="primary" onClick={() => blocker.reset?.()}>
          Stay
        </Button>
      </>
    }
  >
    The last changes to this scenario are not saved yet. It saves itself within a second, unless the server cannot be reached.
  </Dialog>
);
