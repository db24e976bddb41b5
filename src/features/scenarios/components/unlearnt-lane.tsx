import type { DriverColour } from "@/components/charts/drivers";

/** In place of a lane whose driver no model of these stores could learn: it says so instead of leaving a gap. */
export const UnlearntLane = ({ driver, label }: { driver: DriverColour; label: string }) => (
  <div data-driver={driver} className="border-b border-hairline p-4 last:border-b-0">
    <div className="flex items-center gap-2">
      <span className="size-2.5 rounded-xs border border-driver" aria-hidden="true" />
      <span className="font-semibold">{label}</span>
    </div>
    <p className="mt-1 text-sm text-muted">
      Not in the model: in the weeks it was fitted to, this driver hardly moved in these stores, so its effect could not be learnt.
    </p>
  </div>
);
