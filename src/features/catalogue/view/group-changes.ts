import type { CatalogueChange } from "@shared/contract/catalogue-history";

/** Changes of one kind that one person's file or call brought at once; one alone is a group too. */
export type ChangeGroup = CatalogueChange[];

/** From so many on they are told together. */
const fewestTogether = 4;

const isSame = (one: CatalogueChange, other: CatalogueChange): boolean =>
  one.what === other.what && one.change === other.change && one.at === other.at && one.person?.id === other.person?.id && one.file?.id === other.file?.id;

/** Neighbours that came at once as one group, where there are several; the order stays. */
export const groupChanges = (changes: readonly CatalogueChange[]): ChangeGroup[] => {
  const runs: ChangeGroup[] = [];
  for (const change of changes) {
    const run = runs.at(-1);
    if (run && isSame(run[0], change)) run.push(change);
    else runs.push([change]);
  }
  return runs.flatMap((run) => (run.length < fewestTogether ? run.map((change) => [change]) : [run]));
};
