/** A value from a place on, until the next. */
export type Step = { x: number; value: number | null };

type Axes = { x: (place: number) => number; y: (value: number) => number };

/** A line that keeps each value until the next step, and breaks where there is none; ends at `until`. */
export const stepPath = (steps: readonly Step[], { x, y }: Axes, until: number): string =>
  steps
    .map(({ x: from, value }, index) => {
      if (value === null) return "";
      const to = steps[index + 1]?.x ?? until;
      const joins = index > 0 && steps[index - 1].value !== null;
      const [left, right, height] = [x(from), x(to), y(value)].map((pixel) => pixel.toFixed(2));
      return `${joins ? "L" : "M"}${left} ${height}L${right} ${height}`;
    })
    .join("");
