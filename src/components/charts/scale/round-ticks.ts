/** Steps people count by, within one power of ten. */
const roundSteps = [1, 2, 2.5, 5, 10];

/** The smallest round step (1, 2, 2.5 or 5 times a power of ten) with at most `count` ticks between two values. */
export const roundStep = (low: number, high: number, count: number): number => {
  const span = Math.abs(high - low);
  if (!(span > 0) || !Number.isFinite(span)) return 1;
  const power = 10 ** Math.floor(Math.log10(span / count));
  for (const scale of [power, power * 10]) {
    for (const step of roundSteps) {
      const size = step * scale;
      if (Math.floor(high / size + 1e-9) - Math.ceil(low / size - 1e-9) + 1 <= count) return size;
    }
  }
  return power * 100;
};

/** Multiples of a step within a range, free of the dust that floating point leaves. */
export const ticksByStep = (low: number, high: number, step: number): number[] => {
  const first = Math.ceil(low / step - 1e-9);
  const last = Math.floor(high / step + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, index) => tidy((first + index) * step));
};

/** At most `count` round values between two ends. */
export const roundTicks = (low: number, high: number, count: number): number[] =>
  ticksByStep(low, high, roundStep(low, high, count));

const tidy = (value: number): number => Number(value.toPrecision(12));
