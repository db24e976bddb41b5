import { useQuery } from "@tanstack/react-query";
import type { FitSummary, Model } from "@shared/contract/drivers";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { curvesQuery } from "../api/curves";
import { salesWeeksQuery } from "../api/sales-weeks";
import { newestRegularPrice } from "../view/past-weeks";
import { DriverLanes } from "./driver-lanes";
import { ModelFacts } from "./model-facts";
import { SalesHistory } from "./sales-history";

type StoreDriversProps = { model: Model; fit: FitSummary; storeName: string; level: number };

/** All that is known of a product in one store: its drivers, what they were learnt from, its weeks. */
export const StoreDrivers = ({ model, fit, storeName, level }: StoreDriversProps) => {
  const curves = useQuery(curvesQuery({ modelId: model.id, store: fit.store, level }));
  const sales = useQuery(salesWeeksQuery(model.product, fit.store));
  const regularPrice = newestRegularPrice(sales.data ?? []);
  return (
    <div className="flex flex-col gap-5">
      <div className="grid grid-cols-[minmax(0,1fr)] gap-5 xl:grid-cols-[minmax(0,1fr)_21rem]">
        <QueryView
          query={curves}
          loading="Drawing the curves"
          failure="The curves could not be drawn"
          skeleton={<CurvesOutline />}
        >
          {(answer) => (
            <DriverLanes
              key={answer.store}
              curves={answer.curves}
              fit={fit}
              level={answer.level}
              band={answer.band}
              regularPrice={regularPrice}
            />
          )}
        </QueryView>
        <ModelFacts model={model} fit={fit} />
      </div>
      <SalesHistory product={model.product} store={fit.store} storeName={storeName} />
    </div>
  );
};

const CurvesOutline = () => (
  <Sheet flush role="status" aria-label="Drawing the curves">
    {["price", "week", "temperature", "promotion"].map((lane) => (
      <div key={lane} className="h-38 border-b border-hairline last:border-b-0" />
    ))}
  </Sheet>
);
