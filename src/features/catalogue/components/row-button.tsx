import type { ReactNode } from "react";

/** Opens a row, by mouse and by keyboard. */
export const RowButton = ({ onPress, children }: { onPress: () => void; children: ReactNode }) => (
  <button
    type="button"
    onClick={onPress}
    className="rounded-xs text-left font-medium sm:whitespace-nowrap text-accent underline decoration-accent/30 underline-offset-3 hover:decoration-accent"
  >
    {children}
  </button>
);
