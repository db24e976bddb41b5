import { useMemo } from "react";
import { BandLine } from "@/components/charts/band-line";
import { GroupLegend } from "@/components/charts/group-legend";
import { LevelDots } from "@/components/charts/level-dots/level-dots";
import { Sheet } from "@/components/ui/sheet";
import { capitalised } from "@/lib/format/capitalised";
import { dotLevels } from "../view/dot-levels";
import { pictureTitles } from "../view/drivers";
import { isLearnt } from "../view/store-curves";
import type { ComparisonViewProps } from "./curve-comparison";
import { LevelTable } from "./level-table";

const labelOf = (level: string) => capitalised(level.replaceAll("_", " "));

/** A driver of a few levels: what each does in each store. */
export const LevelComparison = ({ comparison, driver, groups, groupOf, selected, onSelect }: ComparisonViewProps) => {
  const { chain } = comparison;
  const stores = useMemo(() => comparison.stores.filter(isLearnt), [comparison]);
  const levels = useMemo(() => dotLevels({ stores, chain, groupOf, labelOf }), [stores, chain, groupOf]);
  const rows = stores.map((store) => ({
    id: store.store,
    name: store.name,
    region: store.region,
    group: groupOf(store.region),
    meanWeeklyUnits: store.meanWeeklyUnits,
  }));
  const chainRow = chain && {
    id: "chain",
    name: "Chain",
    region: "",
    group: null,
    meanWeeklyUnits: chain.meanWeeklyUnits,
  };
  return (
    <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-5 xl:grid-cols-2">
      <Sheet>
        <LevelDots
          title={pictureTitles[driver]}
          levels={levels}
          highlighted={selected}
          onHighlight={onSelect}
          legend={<GroupLegend groups={groups} />}
        />
        <p className="mt-2 text-sm text-muted">
          Beside each store's lift: its <BandLine level={comparison.level} band={comparison.band} word="interval" />
        </p>
      </Sheet>
      <Sheet flush>
        <LevelTable rows={rows} chain={chainRow} levels={levels} selected={selected} onSelect={onSelect} />
      </Sheet>
    </div>
  );
};
