import type { ModelData } from "@shared/engine";
import fc from "fast-check";

const whole = (min: number, max: number) => fc.integer({ min, max });
/** Even numbers of four digits: fast-check's own doubles favour the ends and the tiniest. */
const between = (low: number, high: number) => whole(0, 9999).map((step) => low + ((high - low) * step) / 10_000);
const positive = between(0.1, 5);

/** Numbers of every awkward sort: few values, zeros, huge and tiny ones, repeats. */
const awkward = fc.oneof(
  { weight: 6, arbitrary: positive },
  { weight: 3, arbitrary: whole(0, 4) },
  { weight: 1, arbitrary: fc.constantFrom(0, 1e-12, 1e9, -3, 40.5, 5e-324, 1e-300) },
);

/** What a column of that name holds, value by value, where nothing is wrong with it. */
const columns: Record<string, fc.Arbitrary<number> | fc.Arbitrary<string>> = {
  price: positive,
  season: between(0, 1),
  awkward,
  few: whole(1, 5),
  week: whole(-3, 30),
  store: fc.constantFrom("north", "south", "east", "west", "1"),
  code: whole(0, 6),
  promotion: fc.constantFrom("none", "feature", "display"),
  exposure: between(-2, 2),
  trials: fc.oneof({ weight: 5, arbitrary: whole(1, 9) }, { weight: 1, arbitrary: fc.constant(0) }),
  y: fc.oneof({ weight: 8, arbitrary: positive }, { weight: 1, arbitrary: awkward }),
  counts: fc.oneof({ weight: 8, arbitrary: whole(0, 12) }, { weight: 1, arbitrary: whole(0, 3).map((size) => 10 ** size) }),
  share: fc.oneof({ weight: 3, arbitrary: between(0, 1) }, { weight: 2, arbitrary: whole(0, 1) }),
};

export const columnNames = Object.keys(columns);

/** Numbers as fast-check draws them: most near the ends, the tiniest there are among them. */
const wild = fc.double({ min: 0, max: 2, noNaN: true });

type Column = number[] | string[];
type Spoiling = { column: string; row: number; how: "missing" | "shorter" | "constant" | "hole" | "infinite" | "text" | "zero" | "negative" };

const spoiling: fc.Arbitrary<Spoiling> = fc.record({
  column: fc.constantFrom(...columnNames),
  row: fc.nat(1000),
  how: fc.constantFrom("missing", "shorter", "constant", "hole", "infinite", "text", "zero", "negative"),
});

function spoil(data: Record<string, Column>, { column, row, how }: Spoiling): Record<string, Column> {
  const old: (number | string)[] = data[column];
  const put = (value: unknown) => old.map((own, k) => (k === row % old.length ? value : own)) as Column;
  const changed = {
    missing: () => [], shorter: () => old.slice(1) as Column, constant: () => old.map(() => old[0]) as Column, hole: () => put(Number.NaN),
    infinite: () => put(-Infinity), text: () => old.map(String), zero: () => put(0), negative: () => put(-2.5),
  }[how]();
  const { [column]: _, ...others } = data;
  return how === "missing" ? others : { ...others, [column]: changed };
}

const columnOf = (name: string, value: fc.Arbitrary<number | string>, length: number): fc.Arbitrary<Column> => {
  const exactly = { minLength: length, maxLength: length };
  const usual = fc.array(value, exactly) as fc.Arbitrary<Column>;
  if (name !== "price" && name !== "season") return usual;
  return fc.oneof({ weight: 7, arbitrary: usual }, { weight: 1, arbitrary: fc.array(wild, exactly) as fc.Arbitrary<Column> });
};

/** Rows of every column, a quarter of them with something wrong in one or two. */
export const anyData: fc.Arbitrary<ModelData> = fc.oneof(
  { weight: 1, arbitrary: whole(0, 12) }, { weight: 12, arbitrary: whole(13, 60) },
).chain((length) => fc.tuple(
  fc.tuple(...Object.entries(columns).map(([name, value]) => columnOf(name, value, length).map((column) => [name, column] as [string, Column]))),
  length === 0 ? fc.constant([]) : fc.oneof({ weight: 3, arbitrary: fc.constant([]) }, { weight: 1, arbitrary: fc.array(spoiling, { minLength: 1, maxLength: 2 }) }),
)).map(([rows, wrong]) => wrong.reduce((data, one) => (one.column in data ? spoil(data, one) : data), Object.fromEntries(rows)));

/**
 * Rows nobody has seen, made of those fitted to: prices beyond the range, later weeks and earlier ones, a store that is new;
 * levels of factors stay as they are.
 */
export function strangeRows(data: ModelData): ModelData {
  const change: Record<string, (value: number | string, row: number) => number | string> = {
    price: (value, row) => Number(value) * (1 + (row % 3)),
    awkward: (value, row) => Number(value) + (row % 2),
    week: (value, row) => Number(value) + [0, 7, -9, 60][row % 4],
    store: (value, row) => ["here", value, "there"][row % 3],
    season: (value) => Number(value) + 1.25,
  };
  return Object.fromEntries(Object.entries(data).map(([name, column]) =>
    [name, name in change ? Array.from<number | string>(column).map(change[name]) : column])) as ModelData;
}
