import type { Comparison } from "@shared/contract/comparisons";
import { Notice } from "@/components/ui/notice";
import { countOf } from "@/lib/format/number";

/** Stores that are not on the picture, each with the reason. */
export const UnlearntStores = ({ comparison }: { comparison: Comparison }) => {
  const missing = comparison.stores.filter((store) => store.curve === null);
  if (missing.length === 0) return null;
  return (
    <Notice tone="neutral">
      <p className="font-medium">{countOf(missing.length, "store is", "stores are")} not on the picture:</p>
      <ul className="mt-1 text-muted">
        {missing.map((store) => (
          <li key={store.store}>
            {store.name}: {store.reason ?? "it could not learn this driver."}
          </li>
        ))}
      </ul>
    </Notice>
  );
};
