import { fireEvent, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { describe, expect, it, vi } from "vitest";
import { CurveOverlay } from "@/components/charts/curve-overlay/curve-overlay";
import { overlayGeometry, splitByRange } from "@/components/charts/curve-overlay/overlay-geometry";
import { FactorLane } from "@/components/charts/factor-lane/factor-lane";
import { IntervalMark } from "@/components/charts/interval-mark";
import { dotLayout } from "@/components/charts/level-dots/dot-layout";
import { rugStrokes } from "@/components/charts/parts/rug-strokes";
import { linearScale } from "@/components/charts/scale/scale";
import { SumColumn } from "@/components/charts/sum-column/sum-column";
import { runningSums, sumBars, sumScale } from "@/components/charts/sum-column/sum-layout";
import type { SumPart } from "@/components/charts/sum-column/sum-layout";
import { WeekBars } from "@/components/charts/week-bars/week-bars";
import { labelledPast, weekLayout } from "@/components/charts/week-bars/week-layout";
import { yearSpans } from "@/components/charts/week-bars/year-spans";
import { formatNumber } from "@/lib/format/number";
import { renderInPage } from "./support/render";

const number = (element: Element | null | undefined, attribute: string) => Number(element?.getAttribute(attribute));

describe("the sum column", () => {
  const parts: SumPart[] = [
    { id: "normal", label: "Base", kind: "level", units: 4000 },
    { id: "weather", label: "Weather", kind: "step", units: 500, driver: "temperature" },
    { id: "base", label: "Base here", kind: "level", units: 4500 },
    { id: "price", label: "Price", kind: "step", units: -700, driver: "price" },
    { id: "promotion", label: "Promo", kind: "step", units: 1200, driver: "promotion" },
    { id: "total", label: "Plan", kind: "total", units: 5000 },
  ];
  const interval = { lower: 4400, upper: 5700, level: 0.8 };

  it("begins each step where the one before ended, and ends at the total", () => {
    expect(runningSums(parts).map(({ to }) => to)).toEqual([4000, 4500, 4500, 3800, 5000, 5000]);
    expect(runningSums(parts).map(({ from }) => from)).toEqual([0, 4000, 0, 4500, 3800, 0]);
  });

  it("draws every bar's height to the scale, from zero", () => {
    const y = sumScale({ parts, interval, range: [240, 20] });
    const bars = sumBars({ parts, y, left: 50, right: 350 });
    const perUnit = (y.toPixel(0) - y.toPixel(1000)) / 1000;
    bars.forEach((bar) => expect(bar.bottom - bar.top).toBeCloseTo(Math.abs(bar.units) * perUnit, 8));
    expect(bars[0].bottom).toBeCloseTo(y.toPixel(0), 8);
    expect(bars[4].top).toBeCloseTo(bars[5].top, 8);
  });

  it("shows the total's interval and each part's units with their sign", () => {
    renderInPage(
      <SumColumn
        title="From base to plan"
        parts={parts}
        interval={interval}
        format={formatNumber}
        formatSigned={(units) => formatNumber(units, { signed: true })}
      />,
    );
    expect(screen.getByText("−700")).toBeTruthy();
    expect(screen.getByText("+1,200")).toBeTruthy();
    const whisker = document.querySelector('[data-part="whisker"] path')?.getAttribute("d") ?? "";
    const y = sumScale({ parts, interval, range: [268 - 26, 26] });
    expect(whisker).toContain(`${y.toPixel(4400)}V${y.toPixel(5700)}`);
  });
});

describe("weeks", () => {
  const past = [
    { week: "2026-05-11", label: "wk 20", year: 2026, units: 400 },
    { week: "2026-05-18", label: "wk 21", year: 2026, units: null },
    { week: "2026-05-25", label: "wk 22", year: 2026, units: 500 },
  ];
  const plan = [
    { week: "2026-06-08", label: "wk 24", year: 2026, units: 800, lower: 700, upper: 900, base: 450 },
    { week: "2026-06-15", label: "wk 25", year: 2026, units: 750, lower: 650, upper: 850, base: 460 },
  ];

  it("leave a gap where nothing was recorded", () => {
    renderInPage(
      <WeekBars title="Weeks" past={past} plan={plan} selected={null} onSelect={vi.fn()} format={formatNumber} />,
    );
    expect(document.querySelectorAll("rect[data-week]")).toHaveLength(2);
    expect(document.querySelector('rect[data-week="2026-05-18"]')).toBeNull();
    const gap = document.querySelector('rect[data-gap="2026-05-18"]');
    const [before, after] = ["2026-05-11", "2026-05-25"].map((week) => document.querySelector(`rect[data-week="${week}"]`));
    expect(number(gap, "x")).toBeGreaterThan(number(before, "x") + number(before, "width"));
    expect(number(gap, "x") + number(gap, "width")).toBeLessThan(number(after, "x"));
    expect(screen.getByText("nothing recorded in that week")).toBeTruthy();
  });

  it("that sold nothing stand as a line on the axis, not as a gap", () => {
    const quiet = [{ ...past[0], units: 0 }, past[2]];
    renderInPage(
      <WeekBars title="Weeks" past={quiet} plan={plan} selected={null} onSelect={vi.fn()} format={formatNumber} />,
    );
    expect(number(document.querySelector('rect[data-week="2026-05-11"]'), "height")).toBe(1);
    expect(document.querySelector("rect[data-gap]")).toBeNull();
    expect(screen.queryByText("nothing recorded in that week")).toBeNull();
  });

  it("carry their years where there are several, each from its first week on, and none where there is one", () => {
    const turn = [{ ...past[0], year: 2025 }, { ...past[1], year: 2025 }, past[2]];
    const { past: bars, plan: planned } = weekLayout({ past: turn, plan, left: 50, right: 850, range: [188, 12] });
    const spans = yearSpans([...bars, ...planned]);
    expect(spans.map(({ year }) => year)).toEqual([2025, 2026]);
    expect(spans[1].left).toBe(bars[2].left);
    expect(spans[1].right).toBeCloseTo(planned[1].left + planned[1].width, 8);
    const { unmount } = renderInPage(
      <WeekBars title="Weeks" past={turn} plan={plan} selected={null} onSelect={vi.fn()} format={formatNumber} />,
    );
    const years = () => [...document.querySelectorAll('[data-part="years"] text')].map((text) => text.textContent);
    expect(years()).toEqual(["2025", "2026"]);
    unmount();
    renderInPage(
      <WeekBars title="Weeks" past={past} plan={plan} selected={null} onSelect={vi.fn()} format={formatNumber} />,
    );
    expect(years()).toEqual([]);
  });

  it("stand on zero and share one scale, past and planned", () => {
    const { y, plan: bars } = weekLayout({ past, plan, left: 50, right: 850, range: [188, 12] });
    expect(y.domain[0]).toBe(0);
    expect(y.domain[1]).toBeGreaterThanOrEqual(900);
    expect(bars[0].left + bars[0].width).toBeLessThan(bars[1].left);
  });

  it("drop the oldest where there is no room for all", () => {
    const many = Array.from({ length: 156 }, (_, index) => ({ week: `w${index}`, label: `${index}`, year: 2026, units: 1 }));
    const { past: kept } = weekLayout({ past: many, plan, left: 50, right: 350, range: [188, 12] });
    expect(kept.length).toBeLessThan(60);
    expect(kept[kept.length - 1].week).toBe("w155");
    expect(kept[kept.length - 1].index).toBe(155);
  });

  it("carry labels that neither run into each other nor beyond the right end", () => {
    const many = Array.from({ length: 60 }, (_, index) => ({ week: `w${index}`, label: "wk 22", year: 2026, units: 1 }));
    const { past: bars } = weekLayout({ past: many, plan: [], left: 50, right: 550, range: [188, 12] });
    const labelled = labelledPast(bars);
    expect(labelled.length).toBeGreaterThan(5);
    labelled.forEach((bar, index) => {
      expect(bar.middle + 18).toBeLessThanOrEqual(550);
      if (index > 0) expect(bar.middle - labelled[index - 1].middle).toBeGreaterThanOrEqual(46);
    });
  });

  it("are chosen by keyboard among the plan's weeks", async () => {
    const onSelect = vi.fn();
    renderInPage(
      <WeekBars
        title="Weeks"
        past={past}
        plan={plan}
        selected="2026-06-08"
        onSelect={onSelect}
        format={formatNumber}
      />,
    );
    screen.getByRole("radio", { name: "wk 24" }).focus();
    await userEvent.keyboard("{ArrowRight}");
    expect(onSelect).toHaveBeenCalledWith("2026-06-15");
  });
});

describe("a driver of levels", () => {
  const levels = [
    { value: "none", label: "None", estimate: 1, lower: 1, upper: 1, weeks: 120 },
    { value: "feature", label: "Feature", estimate: 1.42, lower: 1.28, upper: 1.58, weeks: 22 },
    { value: "both", label: "Both", estimate: null, lower: null, upper: null, weeks: 1 },
  ];

  it("is a group of radio buttons, of which those never learnt cannot be chosen", async () => {
    const onChange = vi.fn();
    renderInPage(
      <FactorLane
        driver="promotion"
        label="Promotion"
        title="Demand by promotion"
        levels={levels}
        value="none"
        baseline="none"
        onChange={onChange}
      />,
    );
    expect(screen.getByRole<HTMLInputElement>("radio", { name: "Both, not learnt" }).disabled).toBe(true);
    screen.getByRole("radio", { name: "None" }).focus();
    await userEvent.keyboard("{ArrowRight}");
    expect(onChange).toHaveBeenCalledWith("feature");
  });

  it("draws each level's bar inside its band", () => {
    renderInPage(
      <FactorLane
        driver="promotion"
        label="Promotion"
        title="Demand by promotion"
        levels={levels}
        value="feature"
        baseline="none"
        onChange={vi.fn()}
      />,
    );
    const level = document.querySelector('[data-level="feature"]');
    const band = level?.querySelector('[data-part="band"]');
    const bar = number(level?.querySelector('[data-part="bar"]'), "y1");
    expect(bar).toBeGreaterThan(number(band, "y"));
    expect(bar).toBeLessThan(number(band, "y") + number(band, "height"));
  });

  it("hatches a level that most of several stores hardly saw, however many weeks they have together", () => {
    const hatched = (isHardlySeen: boolean) => {
      const { container, unmount } = renderInPage(
        <FactorLane
          driver="promotion"
          label="Promotion"
          title="Demand by promotion"
          levels={levels.map((level) => ({ ...level, weeks: 9, isHardlySeen }))}
          value="feature"
          baseline="none"
          onChange={vi.fn()}
        />,
      );
      const fills = [...container.querySelectorAll('[data-level="feature"] rect')].map((rect) => rect.getAttribute("fill"));
      unmount();
      return fills.filter((fill) => fill?.startsWith("url(#")).length;
    };
    expect([hatched(true), hatched(false)]).toEqual([1, 0]);
  });

  it("has stores in the order of their estimates within each level", () => {
    const dots = [1.5, 1.2, 1.9].map((estimate, index) => ({
      id: `s${index}`,
      name: "",
      group: 1 as const,
      estimate,
      lower: estimate,
      upper: estimate,
    }));
    const { columns } = dotLayout({
      levels: [{ value: "feature", label: "Feature", dots, chain: 1.4 }],
      width: 400,
      height: 300,
    });
    expect(columns[0].dots.map(({ id }) => id)).toEqual(["s1", "s0", "s2"]);
    expect(columns[0].dots[0].x).toBeLessThan(columns[0].dots[1].x);
  });
});

describe("many stores on one picture", () => {
  const line = (id: string, slope: number, range: [number, number] | null) => ({
    id,
    name: id,
    group: 1 as const,
    range,
    points: [1, 1.25, 1.5, 1.75, 2].map((x) => {
      const estimate = (x / 1.5) ** slope;
      return { x, estimate, lower: estimate * 0.9, upper: estimate * 1.1 };
    }),
  });
  const curves = [line("Ashgill", -3, [1.25, 1.75]), line("Yarrowby", -0.5, null)];
  const renderOverlay = (onHighlight: (id: string | null) => void) =>
    renderInPage(
      <CurveOverlay
        title="All stores"
        xLabel="Price"
        curves={curves}
        chain={null}
        domain={[1, 2]}
        anchor={1.5}
        format={String}
        highlighted={null}
        onHighlight={onHighlight}
      />,
    );

  it("cut a curve where its store's own range ends", () => {
    const { inside, before, after } = splitByRange(curves[0].points, [1.25, 1.75]);
    expect(inside.map(({ x }) => x)).toEqual([1.25, 1.5, 1.75]);
    expect(before.map(({ x }) => x)).toEqual([1, 1.25]);
    expect(after.map(({ x }) => x)).toEqual([1.75, 2]);
  });

  it("draw what lies outside that range dashed", () => {
    renderOverlay(vi.fn());
    const dashed = (id: string) => document.querySelectorAll(`[data-curve="${id}"] path[stroke-dasharray]`).length;
    expect([dashed("Ashgill"), dashed("Yarrowby")]).toEqual([2, 0]);
  });

  it("name the store under the pointer and choose it when pressed", () => {
    const onHighlight = vi.fn();
    renderOverlay(onHighlight);
    const geometry = overlayGeometry({
      width: 720,
      height: 420,
      domain: [1, 2],
      curves: curves.map(({ points }) => points),
    });
    const at = {
      clientX: geometry.margin.left + geometry.x.toPixel(1.25),
      clientY: geometry.margin.top + geometry.y.toPixel((1.25 / 1.5) ** -3),
    };
    const surface = screen.getByRole("img", { name: "All stores" }).closest(".cursor-pointer");
    if (!surface) throw new Error("There is nothing to point at.");
    fireEvent.pointerMove(surface, at);
    expect(screen.getByText("Ashgill", { selector: "text" })).toBeTruthy();
    fireEvent.click(surface, at);
    expect(onHighlight).toHaveBeenCalledWith("Ashgill");
  });
});

describe("small marks", () => {
  it("keep an interval within its row's axis however wide it is", () => {
    renderInPage(<IntervalMark estimate={-2} lower={-90} upper={-1} domain={[-3, 0]} group={1} width={150} />);
    const line = document.querySelector('[data-part="interval"]');
    expect(number(line, "x1")).toBe(8);
    expect(number(line, "x2")).toBeCloseTo(linearScale({ domain: [-3, 0], range: [8, 142] }).toPixel(-1), 8);
  });

  it("raise a rug's stroke where weeks share a value", () => {
    const strokes = rugStrokes([1.5, 1.5, 1.5, 1.5, 1.2], linearScale({ domain: [1, 2], range: [0, 400] }));
    expect(strokes.map(({ place, count }) => [place, count])).toEqual([
      [200, 4],
      [80, 1],
    ]);
    expect(strokes[0].height).toBeGreaterThan(strokes[1].height);
  });
});
