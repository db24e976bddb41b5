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

  it("may repeat, for all that is known, where there are more than can be watched", () => {
    const seen = new SeenKeys({ stores: 20_000, products: 20_000 });
    seen.add(1, 1, week(0));
    expect(seen.mayRepeat).toBe(true);
    const long = new SeenKeys({ stores: 1_000, products: 100_000 });
    for (let at = 0; at < 3; at++) long.add(1, 1, week(at));
    expect(long.mayRepeat).toBe(true);
  });
});
