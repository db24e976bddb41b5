import { describe, expect, it } from "vitest";
import { growthPicture, roundTicks } from "../bench/engine/growth-picture";

describe("The picture of how fits' time grows", () => {
  it.each([
    [12, [0, 2, 4, 6, 8, 10, 12]], [61, [0, 10, 20, 30, 40, 50, 60, 70]], [100_000, [0, 20_000, 40_000, 60_000, 80_000, 100_000]],
    [0.7, [0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7]],
  ])("has round ticks from zero to %d or just beyond", (largest, ticks) => expect(roundTicks(largest)).toEqual(ticks));

  it("places every point on the scale of its axes", () => {
    const picture = growthPicture([{ title: "Rows", across: "rows", lines: [{ label: "normal", points: [{ size: 0, ms: 0 }, { size: 50, ms: 20 }, { size: 100, ms: 40 }] }] }]);
    const path = picture.match(/<path d="M([\d. L]+)"/)?.[1] ?? "";
    const points = path.split("L").map((point) => point.trim().split(" ").map(Number));
    const ticks = (label: string) => Number(picture.match(new RegExp(`<text x="([\\d.]+)" y="[\\d.]+" text-anchor="middle"[^>]*>${label}</text>`))?.[1]);
    expect(points.map(([x]) => x)).toEqual([ticks("0"), (ticks("0") + ticks("100")) / 2, ticks("100")]);
    expect(points[1][1]).toBeCloseTo((points[0][1] + points[2][1]) / 2, 9);
  });

  it("names both axes and each line of each panel", () => {
    const points = [{ size: 10, ms: 3 }];
    const lines = [{ label: "normal", points }, { label: "quasi-Poisson", points }];
    const picture = growthPicture(["Rows", "Stores"].map((title) => ({ title, across: `by ${title}`, lines })));
    for (const words of ["Rows", "Stores", "by Rows", "by Stores"]) expect(picture).toContain(`>${words}</text>`);
    for (const words of ["ms a fit, processor time", "normal", "quasi-Poisson"]) expect(picture.split(`>${words}</text>`)).toHaveLength(3);
  });
});
