import { screen } from "@testing-library/react";
import { describe, expect, it } from "vitest";
import { BandLine } from "@/components/charts/band-line";
import { Lanes } from "@/components/charts/driver-lane/lanes";
import { renderInPage } from "./support/render";

const meaning = () => screen.getByRole("button").getAttribute("aria-description");

describe("What a band means", () => {
  it("is said under the lanes: its level, and that smoothness is an estimate", () => {
    renderInPage(<Lanes label="Drivers" level={0.95} band="averaged">lanes</Lanes>);
    expect(screen.getByText(/Shaded along a line/).textContent)
      .toMatch(/Shaded along a line: its 95\u202F% band; it allows for how smooth a curve is being an estimate too\.$/);
    expect(meaning()).toBe(
      "Over curves like this, about 95 of 100 true values lie inside. Other curves that the same weeks leave possible, smoother ones and less smooth ones, count in it.",
    );
  });

  it("owns up to smoothness taken as given, where a model can have no other band", () => {
    renderInPage(<p data-testid="line">Beside: its <BandLine level={0.8} band="pointwise" word="interval" /></p>);
    expect(screen.getByTestId("line").textContent).toBe("Beside: its 80\u202F% interval; it takes how smooth a curve is as given.");
    expect(meaning()).toMatch(/^Over curves like this, about 80 of 100 .* it is too narrow\.$/);
  });
});
