import type { Curve, FitSummary, ShownBand } from "@shared/contract/drivers";
import { Lanes } from "@/components/charts/driver-lane/lanes";
import { isLevelCurve, isNumberCurve } from "../view/curve-points";
import { driverColour, driverLabel, inLaneOrder } from "../view/driver-words";
import { LevelLane } from "./level-lane";
import { PlainLane } from "./plain-lane";
import { PriceLane } from "./price-lane";
import { SeasonLane } from "./season-lane";
import { TemperatureLane } from "./temperature-lane";

type DriverLanesProps = {
  curves: readonly Curve[];
  fit: FitSummary;
  level: number;
  band: ShownBand;
  regularPrice: number | null;
};

/** One lane per driver of the store's model, then those that could not be learnt, with the reason. */
export const DriverLanes = ({ curves, fit, level, band, regularPrice }: DriverLanesProps) => (
  <Lanes label="Drivers" level={level} band={band}>
    {inLaneOrder(curves).map((curve) => (
      <LaneFor key={`${fit.store} ${curve.term}`} curve={curve} fit={fit} level={level} regularPrice={regularPrice} />
    ))}
    {fit.leftOut.map(({ driver, reason }) => (
      <div key={driver} data-driver={driverColour(driver)} className="border-b border-hairline p-4 last:border-b-0">
        <p className="flex items-center gap-2 font-semibold">
          <span className="size-2.5 rounded-xs border border-driver" aria-hidden="true" />
          {driverLabel(driver)}
        </p>
        <p className="mt-1 text-sm text-muted">Not learnt here. {reason}</p>
      </div>
    ))}
  </Lanes>
);

type LaneForProps = { curve: Curve; fit: FitSummary; level: number; regularPrice: number | null };

const LaneFor = ({ curve, fit, level, regularPrice }: LaneForProps) => {
  if (isLevelCurve(curve)) return <LevelLane curve={curve} level={level} />;
  if (!isNumberCurve(curve)) return null;
  if (curve.driver === "price") return <PriceLane curve={curve} level={level} fit={fit} regularPrice={regularPrice} />;
  if (curve.driver === "season") return <SeasonLane curve={curve} level={level} newestWeek={fit.lastWeek} />;
  if (curve.driver === "temperature") return <TemperatureLane curve={curve} level={level} />;
  return <PlainLane curve={curve} level={level} />;
};
