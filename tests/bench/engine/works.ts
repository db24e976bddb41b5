import type { ModelSpec } from "@shared/engine";
import { everySeries, rowsWhere, type Rows } from "./rows";

/** One line of the bench's table: what is fitted, and how many times quicker than the reference it must be. */
export type Work = {
  name: "normal" | "quasiPoisson" | "stores" | "everything" | "everySeries";
  title: string;
  requiredRatio: number;
  spec: ModelSpec;
  /** The sets of rows that are fitted, one model each. */
  rowsOf: (rows: Rows) => Rows[];
  /** Fits before times are taken, turns of which the median is taken, and fits in a turn. */
  often: { warm: number; turns: number; repeated: number };
};

const season = { kind: "cyclic-smooth", column: "woy", period: [0.5, 52.5] as [number, number], size: 12 } as const;
const promotions = [{ kind: "factor", column: "deal" }, { kind: "linear", column: "feat" }] as const;
const price = { kind: "smooth", column: "price", log: true, size: 8 } as const;

const quasiPoisson: ModelSpec = { response: "units", family: "quasi-poisson", terms: [price, season, ...promotions] };
const oneSeries = (rows: Rows) => [rowsWhere(rows, (row) => rows.store[row] === "2" && rows.brand[row] === "7")];

export const works: readonly Work[] = [
  {
    name: "normal", title: "one store, one product, normal", requiredRatio: 100,
    spec: { response: "logmove", family: "gaussian", terms: [price, season, ...promotions] },
    rowsOf: oneSeries, often: { warm: 2_000, turns: 41, repeated: 20 },
  },
  {
    name: "quasiPoisson", title: "one store, one product, quasi-Poisson", requiredRatio: 35,
    spec: quasiPoisson, rowsOf: oneSeries, often: { warm: 2_000, turns: 41, repeated: 20 },
  },
  {
    name: "stores", title: "one product, 83 stores, a price curve per store", requiredRatio: 25,
    spec: {
      response: "units", family: "quasi-poisson",
      terms: [
        price, { kind: "factor-smooth", id: "price by store", column: "price", log: true, group: "store", size: 6 },
        season, ...promotions,
      ],
    },
    rowsOf: (rows) => [rowsWhere(rows, (row) => rows.brand[row] === "7")], often: { warm: 12, turns: 15, repeated: 1 },
  },
  {
    name: "everything", title: "all 106,139 rows", requiredRatio: 5,
    spec: {
      response: "logmove", family: "gaussian",
      terms: [
        { kind: "factor", column: "brand" }, { kind: "smooth", id: "price by brand", column: "price", by: "brand", size: 8 },
        season, ...promotions, { kind: "random-effect", column: "store" },
      ],
    },
    rowsOf: (rows) => [rows], often: { warm: 12, turns: 15, repeated: 1 },
  },
  {
    name: "everySeries", title: "all 913 series, quasi-Poisson", requiredRatio: 40,
    spec: quasiPoisson, rowsOf: everySeries, often: { warm: 1, turns: 5, repeated: 1 },
  },
];
