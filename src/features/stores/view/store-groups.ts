import type { StoreGroup } from "@/components/charts/parts/group-shape";

export type RegionGroup = { group: StoreGroup; name: string; count: number };

const places: readonly StoreGroup[] = [1, 2, 3, 4, 5, 6];

/** Each region's shape and colour, by name; beyond six the smallest share the last, called "other regions". */
export const regionGroups = (
  stores: readonly { region: string }[],
): { groups: RegionGroup[]; of: (region: string) => StoreGroup } => {
  const counts = new Map<string, number>();
  for (const { region } of stores) counts.set(region, (counts.get(region) ?? 0) + 1);
  const regions = [...counts].sort((a, b) => b[1] - a[1] || a[0].localeCompare(b[0]));
  const own = regions.length <= places.length ? regions : regions.slice(0, places.length - 1);
  const rest = regions.slice(own.length);
  const groupOf = new Map(
    own
      .map(([region]) => region)
      .sort()
      .map((region, index) => [region, places[index]]),
  );
  const groups = own
    .map(([name, count]) => ({ group: groupOf.get(name) ?? 6, name: name === "" ? "no region" : name, count }))
    .sort((a, b) => a.group - b.group);
  const last: StoreGroup = 6;
  if (rest.length > 0)
    groups.push({ group: last, name: "other regions", count: rest.reduce((sum, [, count]) => sum + count, 0) });
  return { groups, of: (region) => groupOf.get(region) ?? last };
};
