import type { ReactNode } from "react";

export type LaneEffectText = {
  /** "× 1.52", or words such as "as base". */
  multiplier: string;
  /** "1.41 – 1.65" */
  interval?: string;
  /** "+2,858 units" */
  units?: string;
  note?: ReactNode;
};

/** What the driver does, at the lane's right: its multiplier, the interval, the units. */
export const LaneEffect = ({ multiplier, interval, units, note }: LaneEffectText) => (
  <div className="text-right">
    <p className="text-xl font-semibold tracking-[-0.01em] text-driver-text">{multiplier}</p>
    {interval && <p className="text-sm text-muted">{interval}</p>}
    {units && <p className="mt-1.5 text-sm text-muted">{units}</p>}
    {note && <div className="mt-1.5 text-sm text-muted">{note}</div>}
  </div>
);
