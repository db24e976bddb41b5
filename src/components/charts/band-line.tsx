import type { ShownBand } from "@shared/contract/drivers";
import { Term } from "@/components/ui/term";
import { formatPercent } from "@/lib/format/percent";

const allowances: Record<ShownBand, { line: string; meaning: string }> = {
  averaged: {
    line: "it allows for how smooth a curve is being an estimate too",
    meaning: "Other curves that the same weeks leave possible, smoother ones and less smooth ones, count in it.",
  },
  pointwise: {
    line: "it takes how smooth a curve is as given",
    meaning: "Where a curve should be less smooth than it was taken to be, it is too narrow.",
  },
};

/** What a band of that level means, in plain words. */
export const bandMeaning = (level: number, band: ShownBand): string =>
  `Over curves like this, about ${Math.round(level * 100)} of 100 true values lie inside. ${allowances[band].meaning}`;

type BandLineProps = { level: number; band: ShownBand; word?: "band" | "interval" };

/** "80 % band; it allows for …": the level, and what the band allows for, with its meaning on hover. */
export const BandLine = ({ level, band, word = "band" }: BandLineProps) => (
  <>
    <Term meaning={bandMeaning(level, band)}>
      {formatPercent(level)} {word}
    </Term>
    ; {allowances[band].line}.
  </>
);
