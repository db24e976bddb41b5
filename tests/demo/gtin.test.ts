import { describe, expect, it } from "vitest";
import { gtin13 } from "../../demo/chain/gtin";
import { products } from "../../demo/chain/products";

describe("Product numbers of the demo", () => {
  it("get the check digit of GS1's worked example", () => {
    expect(gtin13("629104150021")).toBe("6291041500213");
  });

  it("end in 0 where the weighted sum is a multiple of ten already", () => {
    expect(gtin13("000000000000")).toBe("0000000000000");
    expect(gtin13("100000000003")).toBe("1000000000030");
  });

  it.each(["62910415002", "6291041500213", "62910415002x", ""])("are refused when made from %j", (digits) => {
    expect(() => gtin13(digits)).toThrow(`A GTIN-13 is made from twelve digits, not "${digits}".`);
  });

  it("lie in the range for use inside one company, are valid, and each belongs to one product", () => {
    for (const { gtin } of products) {
      expect(gtin).toMatch(/^2\d{12}$/);
      const weighted = Array.from(gtin, (digit, index) => Number(digit) * (index % 2 === 0 ? 1 : 3));
      expect(weighted.reduce((sum, value) => sum + value, 0) % 10).toBe(0);
    }
    expect(new Set(products.map(({ gtin }) => gtin)).size).toBe(products.length);
  });
});
