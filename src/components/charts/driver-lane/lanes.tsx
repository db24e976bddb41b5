import type { ReactNode } from "react";
import type { ShownBand } from "@shared/contract/drivers";
import { BandLine } from "../band-line";

type LanesProps = { children: ReactNode; label: string; level: number; band: ShownBand };

/** The sheet that holds lanes, one under another, and how to read their marks. */
export const Lanes = ({ children, label, level, band }: LanesProps) => (
  <div className="min-w-0">
    <section aria-label={label} className="rounded-lg border border-hairline bg-sheet print:break-inside-avoid">
      {children}
    </section>
    <p className="mt-2 px-1 text-sm text-muted">
      Hatched: outside what was seen, or with fewer than five weeks near it. Strokes on an axis: weeks it was learnt
      from. Shaded along a line: its <BandLine level={level} band={band} />
    </p>
  </div>
);
