import { memo } from "react";
import type { Scale } from "../scale/scale";

type RugProps = { values: readonly number[]; x: Scale; y: number };

/** One short stroke per week seen, at its exact value; weeks at one value lie over each other and darken it. */
export const Rug = memo(function Rug({ values, x, y }: RugProps) {
  const path = values.map((value) => `M${x.toPixel(value).toFixed(2)} ${y}v5`).join("");
  return <path d={path} fill="none" stroke="var(--driver)" strokeOpacity="0.5" strokeWidth="1" aria-hidden="true" />;
});
