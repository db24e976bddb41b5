import type { ReactNode } from "react";

type LineKeyProps = {
  /** CSS variable of its colour, or of a band's. */
  colour: string;
  looks: "line" | "dashed" | "band";
  children: ReactNode;
};

/** What a line or a band of a chart stands for. */
export const LineKey = ({ colour, looks, children }: LineKeyProps) => (
  <span className="inline-flex items-center gap-2">
    <svg width="22" height="12" aria-hidden="true" className="shrink-0">
      {looks === "band" ? (
        <rect width="22" height="12" style={{ fill: `var(${colour})` }} />
      ) : (
        <line x2="22" y1="6" y2="6" strokeWidth="2" strokeDasharray={looks === "dashed" ? "5 3" : undefined} style={{ stroke: `var(${colour})` }} />
      )}
    </svg>
    {children}
  </span>
);
