import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { xoroshiro128plus } from "pure-rand/generator/xoroshiro128plus";
import { EngineError } from "../errors";

/** Draws that the seed decides. */
export type Random = {
  /** From 0 (included) to 1 (left out). */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
};

/**
 * Seeded random numbers, the same everywhere: xoroshiro128+ (Blackman & Vigna 2018), normal ones by pairs (Box & Muller 1958).
 *
 * @param seed a whole number within 32 bits.
 * @throws EngineError option-invalid for any other seed.
 * @example seededRandom(1).uniform();
 */
export function seededRandom(seed: number): Random {
  if (!Number.isInteger(seed) || Math.abs(seed) > 2 ** 31) {
    throw new EngineError("option-invalid", `seed is ${seed}; it must be a whole number within ${2 ** 31} of 0.`);
  }
  const generator = xoroshiro128plus(seed);
  const uniform = () => uniformFloat64(generator);
  let kept: number | null = null;
  return {
    uniform,
    normal() {
      if (kept !== null) {
        const value = kept;
        kept = null;
        return value;
      }
      const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
      const angle = 2 * Math.PI * uniform();
      kept = radius * Math.sin(angle);
      return radius * Math.cos(angle);
    },
  };
}
