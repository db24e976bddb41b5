/** Maps values to pixels and back. Handle, dot, rug and axis of one chart share one such object. */
export type Scale = {
  kind: "linear" | "log";
  domain: readonly [number, number];
  /** Pixels at the ends of the domain; for a vertical scale the first is the lower edge. */
  range: readonly [number, number];
  toPixel: (value: number) => number;
  toValue: (pixel: number) => number;
};

type ScaleOptions = { domain: readonly [number, number]; range: readonly [number, number] };

/** Equal differences take equal lengths. A domain without width sits in the middle of the range. */
export const linearScale = ({ domain, range }: ScaleOptions): Scale => {
  const [low, high] = domain;
  const [start, end] = range;
  const width = high - low;
  return {
    kind: "linear",
    domain,
    range,
    toPixel: (value) => (width === 0 ? (start + end) / 2 : start + ((value - low) / width) * (end - start)),
    toValue: (pixel) => (start === end ? low : low + ((pixel - start) / (end - start)) * width),
  };
};

/** Equal ratios take equal lengths: twice and half lie equally far from one. The domain must be above zero. */
export const logScale = ({ domain, range }: ScaleOptions): Scale => {
  if (!(domain[0] > 0 && domain[1] > 0)) {
    throw new RangeError(`A log scale needs a domain above zero; got ${domain[0]} to ${domain[1]}.`);
  }
  const inner = linearScale({ domain: [Math.log(domain[0]), Math.log(domain[1])], range });
  return {
    kind: "log",
    domain,
    range,
    toPixel: (value) => inner.toPixel(Math.log(value)),
    toValue: (pixel) => Math.exp(inner.toValue(pixel)),
  };
};
