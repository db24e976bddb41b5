import type { ReactNode } from "react";

/** The sheet that holds lanes, one under another. */
export const Lanes = ({ children, label }: { children: ReactNode; label: string }) => (
  <section aria-label={label} className="rounded-lg border border-hairline bg-sheet print:break-inside-avoid">
    {children}
  </section>
);
