import { useQuery } from "@tanstack/react-query";
import { Redo2, Undo2 } from "lucide-react";
import type { Product } from "@shared/contract/catalogue";
import type { Scenario } from "@shared/contract/scenarios";
import { IconButton } from "@/components/ui/icon-button";
import { PageHeader } from "@/components/ui/page-header";
import { SegmentedControl } from "@/components/ui/segmented-control";
import { TextLink } from "@/components/ui/text-link";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { paths } from "@/lib/paths";
import { usePermission, useSession } from "@/lib/session";
import type { SaveState } from "../hooks/use-autosave";
import type { ScenarioEditing } from "../hooks/use-scenario-edit";
import { modelInUseQuery } from "../api/model-in-use";
import { modelOffer } from "../view/model-offer";
import { readOnlyReason, whoseScenario } from "../view/whose-scenario";
import { ModelNotice } from "./model-notice";
import { SaveLine } from "./save-line";
import { ScenarioMenu } from "./scenario-menu";
import { ScenarioName } from "./scenario-name";

type ScenarioHeadProps = {
  scenario: Scenario;
  product: Product | undefined;
  editing: ScenarioEditing;
  saving: { state: SaveState; retry: () => void };
  level: number;
  levels: readonly number[];
  onLevel: (level: number) => void;
};

export const ScenarioHead = ({ scenario, product, editing, saving, level, levels, onLevel }: ScenarioHeadProps) => {
  const format = useChainFormat();
  const session = useSession();
  const mayPlan = usePermission("scenarios:write");
  const { may, stores, weeks } = scenario;
  // Asked for only where the plan's own model is not the one in use: nothing changes by itself.
  const isOther = scenario.model.state !== "in-use" || editing.edit.modelId !== scenario.modelId;
  const inUse = useQuery({ ...modelInUseQuery(scenario.product), enabled: isOther });
  const offer = isOther ? modelOffer(scenario, { modelId: editing.edit.modelId, inUse: inUse.data }) : null;
  return (
    <>
      <p className="mb-1 text-sm print:hidden">
        <TextLink to={paths.scenarios.href()}>Scenarios</TextLink>
      </p>
      <PageHeader
        title={editing.edit.name}
        heading={<ScenarioName name={editing.edit.name} readOnly={!may.edit} onRename={(name) => editing.change({ name })} />}
        facts={[
          product?.name ?? scenario.product,
          stores.length === 1 ? `store ${stores[0]}` : countOf(stores.length, "store"),
          format.weekSpan(weeks.first, weeks.last),
          scenario.modelId === editing.edit.modelId ? `model fitted ${format.moment(scenario.model.fittedAt)}` : "changing the model …",
          whoseScenario(scenario, { personId: session?.person.id }),
          readOnlyReason(scenario, { mayPlan }) ?? <SaveLine state={saving.state} onRetry={saving.retry} />,
        ]}
        actions={
          <>
            {may.edit && (
              <div className="flex gap-1">
                <IconButton label="Undo (Ctrl Z)" disabled={!editing.canUndo} onClick={editing.undo}>
                  <Undo2 />
                </IconButton>
                <IconButton label="Redo (Ctrl Y)" disabled={!editing.canRedo} onClick={editing.redo}>
                  <Redo2 />
                </IconButton>
              </div>
            )}
            <SegmentedControl
              label="Level of the intervals"
              segments={levels.map((one) => ({ value: String(one), label: `${format.percent(one)} interval` }))}
              value={String(level)}
              onChange={(text) => onLevel(Number(text))}
            />
            <ScenarioMenu scenario={scenario} />
          </>
        }
      />
      {offer && (
        <ModelNotice offer={offer} mayEdit={may.edit} onTake={() => editing.change({ modelId: offer.id })} />
      )}
    </>
  );
};
