import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";

type Tests = {
  /** Per smooth: reference degrees of freedom, F, p-value (0 where Davies' integral lost it). */
  smooth: { degrees: number[] | number; statistic: number[] | number; pValue: number[] | number };
  parametric: { statistic: number[] | number; pValue: number[] | number };
  aic: number;
  /** Of the log-likelihood: corrected degrees of freedom and one for the scale. */
  degrees: number;
};

type Influence = { leverage: number[]; cooksDistance: number[]; standardised: number[] };
type Tail = { x: number[]; tail: number[] };

/** What reference.R (beside this folder) wrote; R and package versions are in `madeWith`. */
export type RResults = {
  madeWith: { r: string; packages: Record<string, string> };
  mixtures: {
    chiSquare: Tail & { degrees: number[] };
    f: Tail & { numerator: number[]; denominator: number[] };
    gamma: Tail & { shape: number; scale: number };
    weighted: Tail;
  };
  terms: Record<"levels" | "slopes" | "byLevel" | "byNumber" | "surface", Tests>;
  series: Tests[];
  influence: {
    rows: { price: number[]; promotion: string[]; logUnits: number[]; units: number[]; weight: number[]; share: number[]; trials: number[] };
    line: Influence; counts: Influence; shares: Influence;
  };
  anova: {
    line: { statistic: number; pValue: number };
    shares: { statistic: number; pValue: number };
    perTerm: { statistic: number[]; pValue: number[] };
    aic: [number, number, number, number];
  };
};

export const rResults = JSON.parse(readFileSync(fileURLToPath(new URL("../reference.json", import.meta.url)), "utf8")) as RResults;
