/** A reproducible source of random draws; the same seed and stream give the same draws on every machine. */
export type Random = {
  /** Uniform on [0, 1), 53 bits. */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1. */
  normal(): number;
  /** Gamma with the shape given and scale 1 (mean and variance both equal the shape). */
  gamma(shape: number): number;
  /** Poisson count with the mean given. */
  poisson(mean: number): number;
  /** Whole number from `low` to `high`, both possible. */
  between(low: number, high: number): number;
  /** One of the choices, with probability in proportion to its weight. */
  choose<Choice>(choices: readonly (readonly [Choice, number])[]): Choice;
};

/**
 * Makes an independent stream of draws for a seed and a name, so that a stage which draws more, or a stage
 * added later, leaves the draws of every other stage as they were.
 *
 * Generator: xoshiro128** (Blackman & Vigna, ACM Transactions on Mathematical Software 47 (2021), art. 36), its
 * state filled from a 32-bit mixing of the seed and the name.
 *
 * @example createRandom(7, "weather").normal()
 */
export function createRandom(seed: number, stream: string): Random {
  const word = xoshiro128(hash(`${seed}/${stream}`));
  const uniform = () => ((word() >>> 5) * 67_108_864 + (word() >>> 6)) / 9_007_199_254_740_992;
  const normal = () => polarNormal(uniform);
  return {
    uniform,
    normal,
    gamma: (shape) => gammaDraw(shape, { uniform, normal }),
    poisson: (mean) => poissonDraw(mean, uniform),
    between: (low, high) => low + Math.floor(uniform() * (high - low + 1)),
    choose: (choices) => chooseByWeight(choices, uniform()),
  };
}

/** Four state words from a text: FNV-1a, then a Weyl sequence through the finaliser of MurmurHash3 (Appleby 2011). */
function hash(text: string): Uint32Array {
  let digest = 0x811c9dc5;
  for (let index = 0; index < text.length; index += 1) {
    digest = Math.imul(digest ^ text.charCodeAt(index), 0x01000193);
  }
  return Uint32Array.from([1, 2, 3, 4], (step) => {
    let mixed = (digest + Math.imul(step, 0x9e3779b9)) | 0;
    mixed = Math.imul(mixed ^ (mixed >>> 16), 0x85ebca6b);
    mixed = Math.imul(mixed ^ (mixed >>> 13), 0xc2b2ae35);
    return mixed ^ (mixed >>> 16);
  });
}

const rotateLeft = (word: number, bits: number) => (word << bits) | (word >>> (32 - bits));

function xoshiro128(state: Uint32Array): () => number {
  return () => {
    const result = Math.imul(rotateLeft(Math.imul(state[1], 5), 7), 9) >>> 0;
    const shifted = state[1] << 9;
    state[2] ^= state[0];
    state[3] ^= state[1];
    state[1] ^= state[2];
    state[0] ^= state[3];
    state[2] ^= shifted;
    state[3] = rotateLeft(state[3], 11);
    return result;
  };
}

/** Polar method (Marsaglia & Bray, SIAM Review 6 (1964) 260-264); the second of each pair is not kept. */
function polarNormal(uniform: () => number): number {
  for (;;) {
    const across = 2 * uniform() - 1;
    const up = 2 * uniform() - 1;
    const square = across * across + up * up;
    if (square > 0 && square < 1) return across * Math.sqrt((-2 * Math.log(square)) / square);
  }
}

/** Squeezed cube of a normal (Marsaglia & Tsang, ACM TOMS 26 (2000) 363-372); shapes below 1 by their section 6. */
function gammaDraw(shape: number, draws: { uniform: () => number; normal: () => number }): number {
  if (!(shape > 0)) throw new RangeError(`A gamma draw needs a shape above 0, not ${shape}.`);
  if (shape < 1) return gammaDraw(shape + 1, draws) * Math.pow(1 - draws.uniform(), 1 / shape);
  const offset = shape - 1 / 3;
  const spread = 1 / Math.sqrt(9 * offset);
  for (;;) {
    const normal = draws.normal();
    const cube = Math.pow(1 + spread * normal, 3);
    if (cube <= 0) continue;
    const accepted = 0.5 * normal * normal + offset * (1 - cube + Math.log(cube));
    if (Math.log(1 - draws.uniform()) < accepted) return offset * cube;
  }
}

/** A Poisson mean above this is split into independent parts, before exp(-mean) gets too small to hold. */
const largestPart = 500;

/** Inversion by sequential search (Devroye, Non-Uniform Random Variate Generation, 1986, ch. X.3). */
function poissonDraw(mean: number, uniform: () => number): number {
  if (!(mean >= 0 && Number.isFinite(mean))) {
    throw new RangeError(`A Poisson draw needs a mean of 0 or more, not ${mean}.`);
  }
  let count = 0;
  let left = mean;
  for (; left > largestPart; left -= largestPart) count += poissonPart(largestPart, uniform());
  return count + poissonPart(left, uniform());
}

function poissonPart(mean: number, target: number): number {
  let count = 0;
  let probability = Math.exp(-mean);
  let below = probability;
  // Past this count the tail is smaller than rounding, so `below` may never reach the target.
  const last = Math.ceil(mean + 40 * Math.sqrt(mean + 1));
  while (target >= below && count < last) {
    count += 1;
    probability *= mean / count;
    below += probability;
  }
  return count;
}

function chooseByWeight<Choice>(choices: readonly (readonly [Choice, number])[], uniform: number): Choice {
  const total = choices.reduce((sum, [, weight]) => sum + weight, 0);
  let left = uniform * total;
  for (const [choice, weight] of choices) {
    left -= weight;
    if (left < 0) return choice;
  }
  throw new RangeError("There is nothing to choose from: give at least one choice with a weight above 0.");
}
