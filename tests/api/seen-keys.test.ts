import { describe, expect, it } from "vitest";
import { SeenKeys } from "../../server/features/extracts/check/seen-keys";

const week = (at: number) => `2026-01-${String(at + 1).padStart(2, "0")}`;

describe("keys seen in a file", () => {
  it("do not repeat where each product, store and week stands once, in any order", () => {
    const seen = new SeenKeys({ stores: 7, products: 9 });
    for (let product = 0; product < 9; product++) for (let at = 0; at < 4; at++) for (let store = 6; store >= 0; store--) seen.add(product, store, week(at));
    expect(seen.mayRepeat).toBe(false);
  });

  it.each([[0, 0, 0], [8, 6, 3], [4, 3, 1]])("repeat where product %i, store %i, week %i comes again", (product, store, at) => {
    const seen = new SeenKeys({ stores: 7, products: 9 });
    for (let p = 0; p < 9; p++) for (let w = 0; w < 4; w++) for (let s = 0; s < 7; s++) seen.add(p, s, week(w));
    seen.add(product, store, week(at));
    expect(seen.mayRepeat).toBe(true);
  });

  const seenIn = (weeks: readonly (readonly [product: number, week: string])[]) => {
    const seen = new SeenKeys({ stores: 7, products: 40 });
    for (const [product, of] of weeks) seen.add(product, 3, of);
    return seen;
  };
  const [a, b, c, d] = ["2026-01-05", "2026-01-12", "2026-01-19", "2026-01-26"];

  it.each([
    ["one lacks a week that others have", [[1, a], [1, c], [2, a], [2, b], [2, c]]],
    ["all lack a week", [[1, a], [2, a], [1, c]]],
    ["one comes back after more weeks", [[33, a], [33, d], [5, a], [5, b], [5, c], [5, d]]],
  ] as const)("have a gap where %s, in any order of weeks", (_, weeks) => {
    expect(seenIn(weeks).mayHaveGaps()).toBe(true);
    expect(seenIn([...weeks].reverse()).mayHaveGaps()).toBe(true);
  });

  it.each([
    ["every week is there", [[1, a], [1, b], [1, c]]],
    ["some begin later and some end earlier", [[1, a], [1, b], [2, b], [2, c], [33, c], [33, d]]],
    ["a week that all lack lies between different products", [[1, a], [1, b], [2, d]]],
    ["there is one week, or none", [[1, a]]],
  ] as const)("have no gap where %s", (_, weeks) => {
    expect(seenIn(weeks).mayHaveGaps()).toBe(false);
    expect(seenIn([]).mayHaveGaps()).toBe(false);
  });

  it("may have gaps, for all that is known, once keys repeat", () => {
    expect(seenIn([[1, a], [1, a]]).mayHaveGaps()).toBe(true);
  });

  it("may repeat, for all that is known, where there are more than can be watched", () => {
    const seen = new SeenKeys({ stores: 20_000, products: 20_000 });
    seen.add(1, 1, week(0));
    expect(seen.mayRepeat).toBe(true);
    const long = new SeenKeys({ stores: 1_000, products: 100_000 });
    for (let at = 0; at < 3; at++) long.add(1, 1, week(at));
    expect(long.mayRepeat).toBe(true);
  });
});
