import { useSearchParams } from "react-router-dom";
import { driverFrom } from "../view/drivers";
import type { ComparedDriver } from "../view/drivers";

/** What the address holds of this page, so that a view can be sent to a colleague. */
export const useStoresAddress = () => {
  const [search, setSearch] = useSearchParams();
  const set = (changes: Record<string, string | null>, options: { replace?: boolean } = {}) => {
    const next = new URLSearchParams(search);
    for (const [name, value] of Object.entries(changes)) {
      if (value === null) next.delete(name);
      else next.set(name, value);
    }
    setSearch(next, { preventScrollReset: true, ...options });
  };
  const anchor = Number(search.get("anchor"));
  return {
    product: search.get("product"),
    store: search.get("store"),
    driver: driverFrom(search.get("driver")),
    anchor: anchor > 0 ? anchor : undefined,
    // An anchor belongs to its product.
    setProduct: (product: string) => set({ product, anchor: null }),
    setDriver: (driver: ComparedDriver) => set({ driver }),
    setStore: (store: string) => set({ store }, { replace: true }),
    setAnchor: (value: number | null) => set({ anchor: value === null ? null : String(value) }, { replace: true }),
  };
};
