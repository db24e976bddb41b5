import type { Coverage } from "@shared/contract/coverage";
import type { ChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";

type Stores = Coverage["stores"];
type State = Stores[number]["states"][number];

/** States that are to be looked at. */
const wantingStates: readonly State[] = ["missing", "thin", "withdrawn"];

const count = (stores: Stores, state: State) =>
  stores.reduce((sum, { states }) => sum + states.filter((one) => one === state).length, 0);

/** What the picture says, in a line: how many store-weeks there are, and what is wanting. */
export const coverageSentence = ({ stores, weeks }: Pick<Coverage, "stores" | "weeks">, format: ChainFormat): string => {
  const open = stores.length * weeks.length - count(stores, "closed");
  const parts = wantingStates
    .map((state) => ({ state, number: count(stores, state) }))
    .filter(({ number }) => number > 0)
    .map(({ state, number }) => `${format.number(number)} ${state}`);
  const all = `${countOf(stores.length, "store")} in ${countOf(weeks.length, "week")}: ${countOf(open, "store-week")}`;
  return parts.length === 0 ? `${all}, and all are there.` : `${all}, of which ${parts.join(", ")}.`;
};

/** Whether something of a store is to be looked at. */
export const needsALook = ({ states }: Stores[number]): boolean =>
  states.some((state) => wantingStates.includes(state));

export const coverageSpans = [
  { value: "26", label: "26 weeks" },
  { value: "52", label: "A year" },
  { value: "104", label: "Two years" },
  { value: "156", label: "Three years" },
] as const;
export type CoverageSpan = (typeof coverageSpans)[number]["value"];
