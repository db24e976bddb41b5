import { execFileSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type {
  AllRows, AllSeries, Bands, CountsAndShares, Groups, LocalModels, MadeWith, NaturalAndLocal, TestsOfTerms, VaryingCurves,
} from "./reference-shapes";

export type FitSummary = {
  linearPredictor: number[];
  standardError: number[];
  priceCurve: number[];
  priceError: number[];
  edf: [number, number];
  totalEdf: number;
  dispersion: number;
  deal: number;
  feature: number;
  deviance: number;
  nullDeviance: number;
};

export type SeriesReference = {
  name: string;
  data: { logmove: number[]; units: number[]; price: number[]; woy: number[]; deal: number[]; feat: number[] };
  gaussian: FitSummary;
  quasiPoisson: FitSummary;
};

type Coefficients = { estimate: number[]; error: number[] };

export type References = {
  "counts-and-shares": CountsAndShares;
  "varying-curves": VaryingCurves;
  "natural-and-local": NaturalAndLocal;
  groups: Groups;
  "local-models": LocalModels;
  "tests-of-terms": TestsOfTerms;
  bands: Bands;
  "additive-models": { madeWith: MadeWith; series: SeriesReference[] };
  "linear-models": {
    madeWith: MadeWith;
    iceCream: { data: Record<string, number[]>; fit: Coefficients; rSquared: number };
    longley: { data: Record<string, number[]> };
    simulated: {
      price: number[]; promotion: string[]; exposure: number[]; weight: number[];
      mean: number[]; units: number[]; kilograms: number[];
    };
    logGaussian: {
      fit: Coefficients; dispersion: number; newRows: { price: number[]; promotion: string[] };
      linearPredictor: number[]; standardError: number[];
    };
    quasiPoisson: { fit: Coefficients; dispersion: number; deviance: number; nullDeviance: number; fitted: number[] };
    quantiles: { mean: number[]; dispersion: number[]; probability: number[]; count: number[]; weight: number[] };
  };
  splines: {
    madeWith: MadeWith;
    basis: { lower: number; upper: number; size: number; x: number[]; /** All splines of the first x, then of the second ... */ rows: number[] };
    beyond: {
      data: { x: number[]; w: number[]; o: number[]; y: number[] };
      penalty: number; size: number; at: { x: number[]; o: number[] };
      linearPredictor: number[]; standardError: number[]; edf: number; dispersion: number;
    };
  };
};

const folder = fileURLToPath(new URL("../reference/", import.meta.url));

/** The committed results of a reference script. */
export const committedReference = <Name extends keyof References>(name: Name): References[Name] =>
  JSON.parse(readFileSync(join(folder, `${name}.json`), "utf8")) as References[Name];

/** References too big to be committed. */
type FreshReferences = References & { "all-series": AllSeries; "all-rows": AllRows };

/** Runs the reference script now. */
export const freshReference = <Name extends keyof FreshReferences>(name: Name): FreshReferences[Name] =>
  resultOf(join(folder, `${name}.R`)) as FreshReferences[Name];

/** What tests/engine/inference holds of R: the committed results, and those its script gives now. */
export const inferenceReference = {
  committed: (): unknown => JSON.parse(readFileSync(join(folder, "../inference/reference.json"), "utf8")),
  fresh: (): unknown => resultOf(join(folder, "../inference/reference.R")),
};

function resultOf(script: string): unknown {
  const output = mkdtempSync(join(tmpdir(), "engine-reference-"));
  try {
    const file = join(output, "result.json");
    execFileSync("Rscript", ["--vanilla", script, file], { stdio: ["ignore", "ignore", "inherit"] });
    return JSON.parse(readFileSync(file, "utf8"));
  } finally {
    rmSync(output, { recursive: true });
  }
}
