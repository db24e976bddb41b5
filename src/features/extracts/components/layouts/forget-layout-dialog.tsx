import type { SavedLayout } from "@shared/contract/saved-layouts";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Notice } from "@/components/ui/notice";
import { useForgetLayout } from "../../api/layouts";
import { problemSentence } from "../../view/problem-sentence";

export const ForgetLayoutDialog = ({ saved, onClose }: { saved: SavedLayout; onClose: () => void }) => {
  const forget = useForgetLayout();
  return (
    <Dialog
      open
      onClose={onClose}
      title={`Forget “${saved.name}”?`}
      actions={
        <>
          <Button onClick={onClose}>Keep it</Button>
          <Button tone="danger" onClick={() => forget.mutate(saved.id, { onSuccess: onClose })} busy={forget.isPending}>
            Forget it
          </Button>
        </>
      }
    >
      <p>
        Files that were read by it stay as they are. The next file of this source is not recognised any more: how it is
        read is worked out anew and must be confirmed.
      </p>
      {forget.isError && (
        <div className="mt-4">
          <Notice tone="danger" role="alert">
            {problemSentence(forget.error)}
          </Notice>
        </div>
      )}
    </Dialog>
  );
};
