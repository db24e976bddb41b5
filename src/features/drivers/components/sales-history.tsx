import { useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { WeekBars } from "@/components/charts/week-bars/week-bars";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { useChainFormat } from "@/lib/format/chain-format";
import { salesWeeksQuery } from "../api/sales-weeks";
import { pastWeeks } from "../view/past-weeks";

type SalesHistoryProps = { product: string; store: string; storeName: string };

/** Units of the product in the store, week by week. */
export const SalesHistory = ({ product, store, storeName }: SalesHistoryProps) => {
  const format = useChainFormat();
  const query = useQuery(salesWeeksQuery(product, store));
  const weeks = useMemo(
    () => pastWeeks(query.data ?? [], format.weekName),
    [query.data, format],
  );
  return (
    <Sheet>
      <QueryView
        query={query}
        loading="Reading the weeks"
        failure="The weeks could not be read"
        isEmpty={(rows) => rows.length === 0}
        empty={<p className="text-muted">No weeks of this product are recorded in this store.</p>}
      >
        {() => (
          <WeekBars
            title={`Units sold week by week in ${storeName}`}
            heading={<span className="font-semibold text-ink">Units week by week</span>}
            past={weeks}
            plan={noPlan}
            selected={null}
            onSelect={() => undefined}
            format={format.units}
            height={190}
          />
        )}
      </QueryView>
    </Sheet>
  );
};

const noPlan: readonly never[] = [];
