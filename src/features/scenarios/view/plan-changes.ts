import type { PlanCell } from "@shared/contract/scenarios";

/** What a plan may change in a store-week. */
export type PlanField = Exclude<keyof PlanCell, "store" | "week">;
export type PlanPlace = Pick<PlanCell, "store" | "week">;

const keyOf = ({ store, week }: PlanPlace) => `${store}\n${week}`;

/** Sets one field in every store-week given; undefined puts it back to the base. Cells that change nothing go. */
export function changeAll<Field extends PlanField>(
  cells: readonly PlanCell[],
  { places, field, value }: { places: readonly PlanPlace[]; field: Field; value: PlanCell[Field] | undefined },
): PlanCell[] {
  const changed = new Map(cells.map((cell) => [keyOf(cell), cell]));
  for (const place of places) {
    const cell: PlanCell = { ...(changed.get(keyOf(place)) ?? { store: place.store, week: place.week }), [field]: value };
    if (value === undefined) delete cell[field];
    if (isEmpty(cell)) changed.delete(keyOf(place));
    else changed.set(keyOf(place), cell);
  }
  return [...changed.values()];
}

const isEmpty = (cell: PlanCell) => Object.keys(cell).length === 2;
