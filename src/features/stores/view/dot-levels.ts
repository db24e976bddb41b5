import type { Comparison } from "@shared/contract/comparisons";
import type { DotLevel } from "@/components/charts/level-dots/level-dots";
import type { StoreGroup } from "@/components/charts/parts/group-shape";
import type { LearntStore } from "./store-curves";

type DotLevelsOptions = {
  stores: readonly LearntStore[];
  chain: Comparison["chain"];
  groupOf: (region: string) => StoreGroup;
  labelOf: (level: string) => string;
};

const usualOrder = ["feature", "display", "both"];

/** Levels other than the reference, each with the stores that know it. A reference is one, without doubt, everywhere. */
export const dotLevels = ({ stores, chain, groupOf, labelOf }: DotLevelsOptions): DotLevel[] => {
  const names = (chain?.x ?? []).map(String);
  return names
    .map((value, index): DotLevel => ({
      value,
      label: labelOf(value),
      chain: chain ? Math.exp(chain.estimate[index]) : null,
      dots: stores.flatMap((store) => {
        const at = store.curve.x.map(String).indexOf(value);
        if (at < 0 || store.curve.standardError[at] === 0) return [];
        return {
          id: store.store,
          name: store.name,
          group: groupOf(store.region),
          estimate: Math.exp(store.curve.estimate[at]),
          lower: Math.exp(store.curve.lower[at]),
          upper: Math.exp(store.curve.upper[at]),
        };
      }),
    }))
    .filter((level) => level.dots.length > 0)
    .sort((a, b) => usualOrder.indexOf(a.value) - usualOrder.indexOf(b.value));
};
