import { MoreHorizontal, Trash2 } from "lucide-react";
import { useState } from "react";
import { useNavigate } from "react-router-dom";
import type { Scenario } from "@shared/contract/scenarios";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Menu, MenuItem } from "@/components/ui/menu";
import { useStatusLine } from "@/components/ui/status-line";
import { ApiError } from "@/lib/api-error";
import { paths } from "@/lib/paths";
import { useSession } from "@/lib/session";
import { useDeleteScenario } from "../api/delete-scenario";

/** What is rarely done to a scenario as a whole. */
export const ScenarioMenu = ({ scenario }: { scenario: Scenario }) => {
  const [isAsking, setAsking] = useState(false);
  const isOwn = useSession()?.person.id === scenario.createdBy.id;
  const remove = useDeleteScenario();
  const navigate = useNavigate();
  const status = useStatusLine();
  if (!isOwn || scenario.state !== "draft") return null;
  const confirm = () =>
    remove.mutate(scenario.id, {
      onSuccess: () => {
        status.done(`“${scenario.name}” is deleted.`);
        void navigate(paths.scenarios.href());
      },
      onError: (error) => status.failed(error instanceof ApiError ? error.detail : "The scenario was not deleted."),
    });
  return (
    <>
      <Menu
        trigger={
          <Button aria-label="More">
            <MoreHorizontal aria-hidden="true" />
          </Button>
        }
      >
        <MenuItem onSelect={() => setAsking(true)}>
          <Trash2 aria-hidden="true" /> Delete scenario
        </MenuItem>
      </Menu>
      <Dialog
        open={isAsking}
        onClose={() => setAsking(false)}
        title={`Delete “${scenario.name}”?`}
        actions={
          <>
            <Button onClick={() => setAsking(false)}>Keep it</Button>
            <Button tone="danger" busy={remove.isPending} onClick={confirm}>
              Delete
            </Button>
          </>
        }
      >
        The scenario and its changes are gone for everyone. This cannot be undone.
      </Dialog>
    </>
  );
};
