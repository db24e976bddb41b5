import { layoutSchema, mappableColumns } from "@shared/contract/layouts";
import { defaultWords, isGtin } from "@shared/layouts";
import { describe, expect, it } from "vitest";
import { aLayout } from "./a-layout";

const refusals = (layout: unknown) => layoutSchema.safeParse(layout).error?.issues.map(({ path, message }) => [path.join("."), message]);

describe("a layout", () => {
  it("with the words that layouts start with is one", () => {
    expect(layoutSchema.parse(aLayout())).toEqual(aLayout());
  });

  it.each([
    [{ decimal: ",", thousands: "," } as const, "thousands", "Decimals and thousands cannot have the same sign."],
    [{ mapping: { colour: { from: "position", position: 0 } as const } }, "mapping.colour", 'A sales file has no column "colour".'],
    [{ mapping: { week: { from: "name", name: "Woche" } as const } }, "mapping.week", 'The file has no column "Woche".'],
    [{ mapping: { week: { from: "position", position: 3 } as const } }, "mapping.week", "The file has 3 columns: position 3 lies behind the last."],
    [{ hasHeader: false, mapping: { week: { from: "name", name: "week" } as const } }, "mapping.week", "A file without a header has no names: give the position."],
    [{ words: { ...defaultWords, display: ["Leaflet"] } }, "words.display", '"Leaflet" already means feature.'],
    [{ words: { ...defaultWords, no: ["JA"] } }, "words.no", '"JA" already means yes.'],
    [{ kind: "stores" as const, mapping: { promotion: { from: "value", value: "none" } as const } }, "mapping.promotion", 'A stores file has no column "promotion".'],
  ])("is refused with %j", (changes, path, message) => {
    expect(refusals(aLayout(changes))).toEqual([[path, message]]);
  });

  it("may have one word in a list of yes and in a list of promotions", () => {
    expect(refusals(aLayout({ words: { ...defaultWords, no: ["0"], none: ["0"] } }))).toBeUndefined();
  });

  it("maps a promotion word in files of sales alone", () => {
    expect(mappableColumns("sales")).toContain("promotion");
    expect(mappableColumns("stores")).toEqual(["store", "name", "region", "opened", "closed"]);
  });
});

describe("a GTIN", () => {
  it.each(["96385074", "614141000036", "4006381333931", "10614141000415"])("%s has the right check digit", (gtin) => {
    expect(isGtin(gtin)).toBe(true);
    const wrong = `${gtin.slice(0, -1)}${(Number(gtin.at(-1)) + 1) % 10}`;
    expect(isGtin(wrong)).toBe(false);
  });

  it.each(["4006381333", "40063813339", "", "400638133393a", "123456789012345"])("is not %j", (text) => {
    expect(isGtin(text)).toBe(false);
  });
});
