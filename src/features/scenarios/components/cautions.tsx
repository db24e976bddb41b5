import { Notice } from "@/components/ui/notice";
import { useChainFormat } from "@/lib/format/chain-format";
import type { PlanningContext } from "../api/planning-context";
import type { ScenarioFigures } from "../hooks/use-prediction";
import { lowestRecentPrice } from "../view/history-weeks";

type CautionsProps = { figures: ScenarioFigures; context: PlanningContext; firstWeek: string };

/** True of the noise model that planning has now: it is said wherever a total of several stores shows an interval. */
const independentNoise =
  "The units interval takes each store and week to waver by itself. What all stores share in a week is not in it yet, so it is narrower than it should be.";

/** What to distrust in this plan, and what to check before acting on it. */
export const Cautions = ({ figures, context, firstWeek }: CautionsProps) => {
  const format = useChainFormat();
  const { prediction, cells, leftOut } = figures;
  const isCut = cells.some((cell) => cell.price < cell.regularPrice);
  const givenWeather = prediction.weather.units !== 0;
  const lowest = isCut ? lowestRecentPrice(context.history, firstWeek) : null;
  const lines = [
    ...(givenWeather ? ["The plan assumes this weather in every week and store: its interval says nothing about other weather."] : []),
    ...prediction.flags.map((flag) => flag.detail),
    ...leftOut.map(({ store, weeks, reason }) => `Left out: store ${store}, ${weeks} ${weeks === 1 ? "week" : "weeks"}: ${reason}.`),
    ...context.notes,
    ...(prediction.stores.length > 1 ? [independentNoise] : []),
    "Curves describe past weeks; they do not prove cause.",
  ];
  return (
    <div className="flex flex-col gap-3">
      <Notice>
        <ul className="flex flex-col gap-1">
          {[...new Set(lines)].map((line) => (
            <li key={line}>{line}</li>
          ))}
        </ul>
      </Notice>
      {isCut && (
        <Notice tone="neutral">
          {lowest !== null && <>Lowest price in these stores in the weeks just before: {format.price(lowest)}. </>}
          How a reduction may be advertised, and prices that differ between places, are regulated in many countries; age-restricted goods and food
          near its date have rules of their own. Check local law and your legal adviser before acting.
        </Notice>
      )}
    </div>
  );
};
