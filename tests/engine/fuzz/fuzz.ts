import type { TermSpec } from "@shared/engine";
import fc from "fast-check";
import { expect, it } from "vitest";
import { anyData } from "./any-data";
import { anySpec } from "./any-spec";
import { judge } from "./complaints";

/** A file's share of the 2,000: several files, so that they run beside each other. */
const runs = 500;

/** Every kind of term, each of which has to be in some of the models. */
const kinds: readonly TermSpec["kind"][] = [
  "linear", "factor", "smooth", "cyclic-smooth", "natural-spline", "local-regression", "tensor-product", "random-walk", "random-effect", "factor-smooth",
];

/**
 * Judges random specifications on random data, the same for the same seed; a failure names the seed and path that repeat it,
 * and the case as drawn (shrinking it would take longer than finding it).
 */
export function expectFuzz(seed: number): void {
  it(`Any specification on any data gives finite numbers, or an error that names its cause (seed ${seed})`, () => {
    let fitted = 0;
    const found = new Map<string, number>();
    fc.assert(fc.property(anySpec, anyData, (spec, data) => {
      const { model, complaints } = judge(spec, data);
      expect(complaints).toEqual([]);
      if (model === null) return;
      fitted++;
      for (const kind of new Set([model.spec.family, ...model.terms.map((term) => term.kind)])) found.set(kind, (found.get(kind) ?? 0) + 1);
    }), { numRuns: runs, seed, endOnFailure: true });
    // Else the property would hold of errors alone, or of some kinds only.
    expect(fitted).toBeGreaterThan(0.4 * runs);
    for (const kind of [...kinds, "gaussian", "log-gaussian", "quasi-poisson", "negative-binomial", "binomial"]) expect([kind, (found.get(kind) ?? 0) >= 10]).toEqual([kind, true]);
  }, 120_000);
}
