import { useState } from "react";
import type { SavedLayout } from "@shared/contract/saved-layouts";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { TextField } from "@/components/ui/text-field";
import { useRenameLayout } from "../../api/layouts";
import { problemSentence } from "../../view/problem-sentence";

export const RenameLayoutDialog = ({ saved, onClose }: { saved: SavedLayout; onClose: () => void }) => {
  const [name, setName] = useState(saved.name);
  const rename = useRenameLayout();
  const save = () => rename.mutate({ saved, name: name.trim() }, { onSuccess: onClose });
  return (
    <Dialog
      open
      onClose={onClose}
      title="Rename this layout"
      actions={
        <>
          <Button onClick={onClose}>Keep the name</Button>
          <Button tone="primary" onClick={save} busy={rename.isPending} disabled={name.trim() === ""}>
            Rename
          </Button>
        </>
      }
    >
      <TextField
        label="Name"
        value={name}
        maxLength={80}
        onChange={(event) => setName(event.target.value)}
        error={rename.isError ? problemSentence(rename.error) : undefined}
        hint="Scripts that ask for this layout by its name must be told the new one."
      />
    </Dialog>
  );
};
