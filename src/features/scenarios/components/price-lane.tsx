import { useMemo } from "react";
import { elasticityAt, laneCurve } from "@shared/planning";
import { DriverLane } from "@/components/charts/driver-lane/driver-lane";
import { unseenRanges } from "@/components/charts/scale/unseen-ranges";
import { Term } from "@/components/ui/term";
import { useChain } from "@/lib/chain";
import { currencyDigits } from "@/lib/format/money";
import { useChainFormat } from "@/lib/format/chain-format";
import { laneEffect } from "../view/lane-effect";
import { axisValues, lanePoints, supportFor } from "../view/lane-points";
import { laneNumber, pricesOf, regularPricesOf } from "../view/plan-values";
import { priceAxis } from "../view/price-axis";
import { readPrice } from "../view/read-price";
import { seenValues } from "../view/seen-values";
import type { BenchProps } from "./bench-lanes";
import { UnlearntLane } from "./unlearnt-lane";

/** The price of all store-weeks, on the stores' price curve. */
export const PriceLane = ({ figures, level, readOnly, preview, set }: BenchProps) => {
  const format = useChainFormat();
  const digits = currencyDigits(useChain()?.currency ?? "EUR");
  const { laneStores, baseCells, cells, prediction } = figures;
  const planned = laneNumber(pricesOf(cells));
  const baseline = laneNumber(regularPricesOf(baseCells));
  const regular = baseline?.value ?? 0;

  const still = useMemo(() => {
    const seen = laneCurve({ stores: laneStores, driver: "price", level })?.observedRange ?? null;
    if (!seen) return null;
    const steps = priceAxis({ seen, prices: regularPricesOf(baseCells), digits });
    const x = axisValues(steps.min, steps.max);
    const curve = laneCurve({ stores: laneStores, driver: "price", level, at: x, relativeTo: regular });
    if (!curve) return null;
    return {
      steps,
      points: lanePoints(curve),
      unseen: unseenRanges(x, supportFor(curve)),
      seen: seenValues(laneStores, "price"),
    };
  }, [laneStores, baseCells, level, digits, regular]);

  if (!still || !planned || !baseline) return <UnlearntLane driver="price" label="Price" />;
  const isMoved = !planned.mixed && planned.value !== baseline.value;
  const elasticity = elasticityAt({ stores: laneStores, price: planned.value, level });
  return (
    <DriverLane
      driver="price"
      label="Price"
      title="Demand by price, relative to the regular price"
      {...still}
      value={planned.value}
      mixed={planned.mixed}
      baseline={baseline.value}
      onChange={(price) => preview("price", price)}
      onCommit={(price) => set("price", price)}
      readOnly={readOnly}
      format={format.price}
      parse={(text) => readPrice(text, baseline.value)}
      hint="A price, or a change on the base such as −20 %."
      effect={laneEffect(prediction.split.find((row) => row.driver === "price"), { format })}
      detail={
        <>
          base {baseline.mixed ? "mixed, mean " : ""}
          {format.price(baseline.value)}
          {isMoved && ` · ${format.percent(planned.value / baseline.value - 1, { signed: true })}`}
          {elasticity && (
            <>
              {" · "}
              <Term meaning="Own-price elasticity: by how many percent units change when the price rises by one percent, at the planned price.">
                elasticity
              </Term>{" "}
              <span className="whitespace-nowrap">{format.number(elasticity.estimate, { digits: 1 })}</span>
            </>
          )}
        </>
      }
    />
  );
};
