import type { Random } from "../random";

/** A stationary first-order autoregression with mean 0 and the standard deviation `spread`. */
export function autoregression(
  { count, spread, persistence, random }: { count: number; spread: number; persistence: number; random: Random },
): number[] {
  const innovation = spread * Math.sqrt(1 - persistence * persistence);
  const values: number[] = [];
  for (let index = 0; index < count; index += 1) {
    const draw = random.normal();
    values.push(index === 0 ? spread * draw : persistence * values[index - 1] + innovation * draw);
  }
  return values;
}
