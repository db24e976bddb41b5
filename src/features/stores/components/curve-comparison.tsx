import { useMemo } from "react";
import type { Comparison } from "@shared/contract/comparisons";
import { BandLine } from "@/components/charts/band-line";
import { CurveOverlay } from "@/components/charts/curve-overlay/curve-overlay";
import { GroupLegend } from "@/components/charts/group-legend";
import { SmallMultiple } from "@/components/charts/small-multiple";
import { ratioDomain } from "@/components/charts/scale/ratio-domain";
import { Sheet } from "@/components/ui/sheet";
import type { StoreGroup } from "@/components/charts/parts/group-shape";
import { pictureTitles } from "../view/drivers";
import type { ComparedDriver } from "../view/drivers";
import { swingOf } from "../view/curve-swing";
import { chainCurve, isLearnt, storeCurve } from "../view/store-curves";
import type { RegionGroup } from "../view/store-groups";
import { useDriverAxis } from "./use-driver-axis";
import { PriceTable } from "./price-table";
import { SwingTable } from "./swing-table";

export type ComparisonViewProps = {
  comparison: Comparison;
  driver: ComparedDriver;
  groups: readonly RegionGroup[];
  groupOf: (region: string) => StoreGroup;
  selected: string | null;
  onSelect: (store: string) => void;
};

/** Curves of a number: all on one picture, each small, and the stores ranked. */
export const CurveComparison = ({ comparison, driver, groups, groupOf, selected, onSelect }: ComparisonViewProps) => {
  const axis = useDriverAxis(driver);
  const { chain, anchor, level } = comparison;
  const stores = useMemo(() => comparison.stores.filter(isLearnt), [comparison]);
  const curves = useMemo(() => stores.map((store) => storeCurve(store, groupOf(store.region))), [stores, groupOf]);
  const chainLine = useMemo(() => (chain ? chainCurve(chain) : null), [chain]);
  const grid = (chain?.x ?? []).map(Number);
  const domain: [number, number] = driver === "season" ? [0, 1] : [grid[0], grid[grid.length - 1]];
  const small = useMemo(
    () =>
      ratioDomain(
        curves.flatMap((curve) =>
          curve.points.map((point) => ({ ...point, lower: point.estimate, upper: point.estimate })),
        ),
      ),
    [curves],
  );
  const rows = stores.map((store, index) => ({
    id: store.store,
    name: store.name,
    region: store.region,
    group: groupOf(store.region),
    meanWeeklyUnits: store.meanWeeklyUnits,
    elasticity: store.elasticity,
    swing: swingOf(curves[index].points, curves[index].range),
  }));
  const chainRow = chain && {
    id: "chain",
    name: "Chain",
    region: "",
    group: null,
    meanWeeklyUnits: chain.meanWeeklyUnits,
    elasticity: chain.elasticity,
    swing: chainLine && swingOf(chainLine.points, null),
  };
  const table = { rows, chain: chainRow, selected, onSelect };
  return (
    <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-5 xl:grid-cols-[minmax(0,1.1fr)_minmax(0,1fr)]">
      <div className="flex min-w-0 flex-col gap-5">
        <Sheet>
          <CurveOverlay
            title={pictureTitles[driver]}
            xLabel={axis.label}
            curves={curves}
            chain={chainLine}
            domain={domain}
            anchor={anchor}
            format={axis.format}
            ticks={axis.ticks}
            highlighted={selected}
            onHighlight={onSelect}
            legend={<GroupLegend groups={groups} />}
          />
          <p className="mt-2 text-sm text-muted">
            Shaded: the chosen store's <BandLine level={level} band={comparison.band} />
          </p>
        </Sheet>
        <Sheet aria-label="Each store's curve over the chain's">
          <div className="grid grid-cols-[repeat(auto-fill,minmax(6.5rem,1fr))] gap-1">
            {curves.map((curve) => (
              <SmallMultiple
                key={curve.id}
                name={curve.name}
                group={curve.group ?? 6}
                points={curve.points}
                chain={chainLine?.points ?? []}
                xDomain={domain}
                yDomain={small}
                isSelected={curve.id === selected}
                onSelect={() => onSelect(curve.id)}
              />
            ))}
          </div>
        </Sheet>
      </div>
      <Sheet flush>
        {driver === "price" ? <PriceTable {...table} level={level} /> : <SwingTable {...table} formatX={axis.format} />}
      </Sheet>
    </div>
  );
};
