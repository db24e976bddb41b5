import { fireEvent, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { useState } from "react";
import { describe, expect, it, vi } from "vitest";
import { DriverLane } from "@/components/charts/driver-lane/driver-lane";
import type { DriverLaneProps } from "@/components/charts/driver-lane/driver-lane";
import { laneGeometry } from "@/components/charts/driver-lane/lane-geometry";
import { curveValueAt } from "@/components/charts/scale/curve-height";
import { parseNumber } from "@/lib/format/parse-number";
import { renderInPage } from "./support/render";

const steps = { min: 1, max: 2, step: 0.01 };
const points = Array.from({ length: 11 }, (_, index) => {
  const x = 1 + index / 10;
  const estimate = (x / 1.5) ** -2.3;
  return { x, estimate, lower: estimate * 0.95, upper: estimate * 1.05 };
});
const seen = [1.2, 1.5, 1.5, 1.79];
/** Without a layout to measure, a lane is as wide as this. */
const geometry = laneGeometry({ width: 600, domain: [steps.min, steps.max], points });

const Lane = (props: Partial<DriverLaneProps>) => {
  const [value, setValue] = useState(1.5);
  const onChange = (next: number) => {
    props.onChange?.(next);
    setValue(next);
  };
  return (
    <DriverLane
      driver="price"
      label="Price"
      title="Demand by price"
      points={points}
      seen={seen}
      unseen={[[1, 1.15]]}
      steps={steps}
      value={value}
      baseline={1.79}
      format={(price) => `€${price.toFixed(2)}`}
      parse={parseNumber}
      {...props}
      onChange={onChange}
    />
  );
};

const slider = () => screen.getByRole("slider", { name: "Price" });
const part = (name: string) => document.querySelector(`[data-part="${name}"]`);
const number = (element: Element | null, attribute: string) => Number(element?.getAttribute(attribute));

describe("a driver's lane", () => {
  it("puts handle, dot, rug, hatching and axis at the same place for the same value", () => {
    renderInPage(<Lane />);
    const expected = geometry.x.toPixel(1.5);
    expect(number(part("dot"), "cx")).toBeCloseTo(expected, 6);
    expect(number(part("stem"), "x1")).toBeCloseTo(expected, 6);
    expect(part("handle")?.getAttribute("transform")).toBe(`translate(${expected} ${geometry.trackY})`);
    const rug = [...(part("rug")?.querySelectorAll("line") ?? [])].map((line) => number(line, "x1"));
    expect(rug).toContain(Math.round(expected * 4) / 4);
    const label = screen.getByText("€1.60", { selector: "text" });
    expect(number(label, "x")).toBeCloseTo(geometry.x.toPixel(1.6), 6);
    const hatched = [...document.querySelectorAll("rect")].find((rect) => rect.getAttribute("fill")?.includes("hatch"));
    expect(number(hatched ?? null, "width")).toBeCloseTo(geometry.x.toPixel(1.15), 6);
  });

  it("draws the line itself through the same scales", () => {
    renderInPage(<Lane />);
    const line = [...document.querySelectorAll("path")].find(
      (path) => path.getAttribute("stroke") === "var(--driver)" && path.getAttribute("d")?.startsWith("M0,"),
    );
    const places = [...(line?.getAttribute("d") ?? "").matchAll(/[ML]([\d.]+),([\d.]+)/g)].map(([, x, y]) => [
      Number(x),
      Number(y),
    ]);
    expect(places).toHaveLength(points.length);
    points.forEach((point, index) => {
      expect(places[index][0]).toBeCloseTo(geometry.x.toPixel(point.x), 2);
      expect(places[index][1]).toBeCloseTo(geometry.y.toPixel(point.estimate), 2);
    });
  });

  it("keeps both dots on the curve", () => {
    renderInPage(<Lane />);
    expect(number(part("dot"), "cy")).toBeCloseTo(geometry.y.toPixel(curveValueAt(points, 1.5).estimate), 6);
    expect(number(part("baseline"), "cy")).toBeCloseTo(geometry.y.toPixel(curveValueAt(points, 1.79).estimate), 6);
    expect(number(part("stretch"), "x1")).toBeCloseTo(geometry.x.toPixel(1.79), 6);
  });

  it("moves by arrows one step, by Page keys ten, by Home and End to the ends", async () => {
    const onCommit = vi.fn();
    renderInPage(<Lane onCommit={onCommit} />);
    slider().focus();
    await userEvent.keyboard("{ArrowLeft}");
    expect(slider().getAttribute("aria-valuetext")).toBe("€1.49");
    await userEvent.keyboard("{PageUp}");
    expect(slider().getAttribute("aria-valuenow")).toBe("1.59");
    await userEvent.keyboard("{Home}");
    expect(slider().getAttribute("aria-valuenow")).toBe("1");
    await userEvent.keyboard("{End}");
    expect(slider().getAttribute("aria-valuenow")).toBe("2");
    await userEvent.keyboard("{End}");
    expect(onCommit.mock.calls.map(([value]) => value)).toEqual([1.49, 1.59, 1, 2]);
  });

  it("takes a typed value, within its ends, and leaves one that is none", async () => {
    const onCommit = vi.fn();
    renderInPage(<Lane onCommit={onCommit} />);
    const field = screen.getByRole("textbox", { name: "Price, typed" });
    await userEvent.clear(field);
    await userEvent.type(field, "1,25{Enter}");
    expect(slider().getAttribute("aria-valuenow")).toBe("1.25");
    await userEvent.clear(field);
    await userEvent.type(field, "9{Enter}");
    expect(slider().getAttribute("aria-valuenow")).toBe("2");
    expect(screen.getByRole("alert").textContent).toBe("The curve ends at €2.00.");
    await userEvent.clear(field);
    expect(screen.queryByRole("alert")).toBeNull();
    await userEvent.type(field, "cheap{Enter}");
    expect(slider().getAttribute("aria-valuenow")).toBe("2");
    expect(screen.getByRole("alert").textContent).toBe("That is no value for it.");
    expect(onCommit.mock.calls.map(([value]) => value)).toEqual([1.25, 2]);
  });

  it("follows the pointer and says once when it is let go", () => {
    const onChange = vi.fn();
    const onCommit = vi.fn();
    renderInPage(<Lane onChange={onChange} onCommit={onCommit} />);
    const at = (price: number) => ({
      pointerId: 1,
      button: 0,
      clientX: geometry.margin.left + geometry.x.toPixel(price),
    });
    fireEvent.pointerDown(slider(), at(1.5));
    fireEvent.pointerMove(slider(), at(1.43));
    fireEvent.pointerMove(slider(), at(1.431));
    fireEvent.pointerMove(slider(), at(1.4));
    expect(onCommit).not.toHaveBeenCalled();
    fireEvent.pointerUp(slider(), at(1.4));
    expect(onChange.mock.calls.map(([value]) => value)).toEqual([1.43, 1.4]);
    expect(onCommit.mock.calls).toEqual([[1.4]]);
    fireEvent.pointerMove(slider(), at(1.9));
    expect(onChange).toHaveBeenCalledTimes(2);
  });

  it("jumps to where its track is pressed", () => {
    renderInPage(<Lane />);
    const track = part("track");
    if (!track) throw new Error("The lane has no track.");
    fireEvent.pointerDown(track, { pointerId: 1, button: 0, clientX: geometry.margin.left + geometry.x.toPixel(1.2) });
    expect(slider().getAttribute("aria-valuenow")).toBe("1.2");
  });

  it("never gives the curve new data while the handle moves", async () => {
    renderInPage(<Lane />);
    const drawing = screen.getByRole("img", { name: "Demand by price" });
    const before = drawing.innerHTML;
    slider().focus();
    await userEvent.keyboard("{PageDown}{PageDown}");
    expect(screen.getByRole("img", { name: "Demand by price" })).toBe(drawing);
    expect(drawing.innerHTML).toBe(before);
  });

  it("says mixed where the plan's store-weeks differ", () => {
    renderInPage(<Lane mixed={[1.3, 1.7]} />);
    expect(screen.getByRole<HTMLInputElement>("textbox").value).toBe("mixed");
    expect(slider().getAttribute("aria-valuetext")).toBe("mixed, €1.50 on average");
    expect(number(part("stretch"), "x1")).toBeCloseTo(geometry.x.toPixel(1.3), 6);
    expect(number(part("stretch"), "x2")).toBeCloseTo(geometry.x.toPixel(1.7), 6);
  });

  it("has no handle and no field where it is only to be read", () => {
    renderInPage(<Lane readOnly />);
    expect(screen.queryByRole("slider")).toBeNull();
    expect(screen.queryByRole("textbox")).toBeNull();
    expect(part("dot")).not.toBeNull();
  });

  it("shows the numbers behind it by the key T, and the curve again by the same key", async () => {
    renderInPage(<Lane />);
    screen.getByRole("figure", { name: "Demand by price" }).focus();
    await userEvent.keyboard("t");
    const table = screen.getByRole("table", { name: "Demand by price" });
    expect(table.querySelectorAll("tbody tr")).toHaveLength(points.length);
    expect(document.activeElement).toBe(screen.getByRole("region", { name: "Numbers of: Demand by price" }));
    await userEvent.keyboard("t");
    expect(screen.queryByRole("table")).toBeNull();
    expect(slider()).toBeTruthy();
  });

  it("does not take a T that is typed into its field for the key", async () => {
    renderInPage(<Lane />);
    await userEvent.type(screen.getByRole("textbox"), "t");
    expect(screen.queryByRole("table")).toBeNull();
  });
});
