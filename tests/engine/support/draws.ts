/** A Poisson draw: by products of uniforms for small means (Knuth 1969), halving large ones by order statistics (Ahrens & Dieter 1974). */
export function poissonDraw(uniform: () => number, mean: number): number {
  if (mean > 20) {
    // The middle event's time is gamma; what comes before or after is Poisson again, or binomial.
    const events = Math.floor(0.875 * mean);
    const time = gammaDraw(uniform, events);
    if (time <= mean) return events + poissonDraw(uniform, mean - time);
    let count = 0;
    for (let k = 1; k < events; k++) if (uniform() < mean / time) count++;
    return count;
  }
  const limit = Math.exp(-mean);
  let count = 0;
  for (let product = uniform(); product > limit; product *= uniform()) count++;
  return count;
}

/** A negative binomial draw of variance mean + mean^2 / size: Poisson about a gamma mean. */
export const negativeBinomialDraw = (uniform: () => number, mean: number, size: number): number =>
  poissonDraw(uniform, (mean / size) * gammaDraw(uniform, size));

/** A gamma draw of scale 1 (Marsaglia & Tsang 2000), shapes below one by a power of a uniform. */
export function gammaDraw(uniform: () => number, shape: number): number {
  if (shape < 1) return gammaDraw(uniform, shape + 1) * (1 - uniform()) ** (1 / shape);
  const third = shape - 1 / 3;
  const scale = 1 / Math.sqrt(9 * third);
  for (;;) {
    const normal = Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
    const cube = (1 + scale * normal) ** 3;
    if (cube > 0 && Math.log(1 - uniform()) < 0.5 * normal * normal + third * (1 - cube + Math.log(cube))) return third * cube;
  }
}
