export type Steps = { min: number; max: number; step: number };

/** The nearest step counted from zero, within the ends; the ends themselves can always be reached. */
export const snap = (value: number, { min, max, step }: Steps): number => {
  if (value <= min) return min;
  if (value >= max) return max;
  const stepped = Number((Math.round(value / step) * step).toPrecision(12));
  return Math.min(max, Math.max(min, stepped));
};

/** Where a slider's key leads; undefined for keys that are none of its business. */
export const valueAfterKey = (key: string, value: number, steps: Steps): number | undefined => {
  const { min, max, step } = steps;
  const by: Record<string, number> = {
    ArrowRight: 1,
    ArrowUp: 1,
    ArrowLeft: -1,
    ArrowDown: -1,
    PageUp: 10,
    PageDown: -10,
  };
  if (key === "Home") return min;
  if (key === "End") return max;
  return key in by ? snap(snap(value, steps) + by[key] * step, steps) : undefined;
};
