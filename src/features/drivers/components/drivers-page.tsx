import { useQuery } from "@tanstack/react-query";
import { useSearchParams } from "react-router-dom";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { SegmentedControl } from "@/components/ui/segmented-control";
import { Sheet } from "@/components/ui/sheet";
import { productsQuery, storesQuery } from "@/lib/catalogue";
import { useChain } from "@/lib/chain";
import { usePermission } from "@/lib/session";
import { modelsQuery } from "../api/models";
import { DriverChoice } from "./driver-choice";
import { FitButton } from "./fit-button";
import { ProductDrivers } from "./product-drivers";

const levels = [
  { value: "0.8", label: "80\u202F%" },
  { value: "0.95", label: "95\u202F%" },
] as const;

/** Drivers of a product in a store; the address holds both, the level and the model looked at. */
export const DriversPage = () => {
  const [search, setSearch] = useSearchParams();
  const usual = useChain()?.intervalLevel ?? 0.8;
  const mayFit = usePermission("models:fit");
  const products = useQuery(productsQuery());
  const stores = useQuery(storesQuery());
  const product = search.get("product") ?? products.data?.[0]?.code ?? "";
  const models = useQuery(modelsQuery(product));
  const level = search.get("level") === "0.95" ? 0.95 : search.get("level") === "0.8" ? 0.8 : usual;
  const set = (changes: Record<string, string | null>) => {
    const next = new URLSearchParams(search);
    for (const [name, value] of Object.entries(changes)) {
      if (value === null) next.delete(name);
      else next.set(name, value);
    }
    setSearch(next, { preventScrollReset: true });
  };
  const known = products.data?.find((one) => one.code === product);
  const store = search.get("store");
  return (
    <>
      <PageHeader
        title={known ? `Drivers of ${known.name}` : "Drivers"}
        facts={["What moves weekly units, learnt from past weeks"]}
        actions={
          <>
            <DriverChoice
              products={products.data ?? []}
              stores={stores.data ?? []}
              product={product || null}
              store={store ?? models.data?.find((model) => model.state === "in-use")?.fits[0]?.store ?? null}
              onProduct={(code) => set({ product: code, model: null })}
              onStore={(code) => set({ product, store: code })}
            />
            <SegmentedControl
              label="Level of the bands"
              segments={levels}
              value={String(level) === "0.95" ? "0.95" : "0.8"}
              onChange={(value) => set({ level: value })}
            />
          </>
        }
      />
      <QueryView
        query={products}
        loading="Reading the products"
        failure="The products could not be read"
        isEmpty={(list) => list.length === 0}
        empty={
          <Sheet>
            <EmptyState title="No products yet">
              Once a data admin has loaded stores, products and weekly sales, drivers can be learnt here.
            </EmptyState>
          </Sheet>
        }
      >
        {() => (
          <QueryView
            query={models}
            loading="Reading the models"
            failure="The models could not be read"
            isEmpty={(list) => list.every((model) => model.fits.length === 0)}
            empty={
              <Sheet>
                <EmptyState
                  title={`Nothing is learnt of ${known?.name ?? "this product"} yet`}
                  action={
                    mayFit && (
                      <FitButton
                        product={product}
                        label="Learn its drivers"
                        tone="primary"
                        jobId={models.data?.[0]?.jobId}
                      />
                    )
                  }
                >
                  {mayFit
                    ? "A fit takes seconds for a store and runs in the background for a chain."
                    : "A planner or category manager can have its drivers learnt from the weeks loaded so far."}
                </EmptyState>
              </Sheet>
            }
          >
            {(list) => (
              <ProductDrivers
                key={product}
                models={list}
                stores={stores.data ?? []}
                wantedModel={search.get("model")}
                wantedStore={store}
                level={level}
                mayFit={mayFit}
                onModel={(id) => set({ model: id })}
              />
            )}
          </QueryView>
        )}
      </QueryView>
    </>
  );
};
