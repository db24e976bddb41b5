import { useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { Combobox } from "@/components/ui/combobox";
import { EmptyState } from "@/components/ui/empty-state";
import { LinkButton } from "@/components/ui/link-button";
import { NumberField } from "@/components/ui/number-field";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { SegmentedControl } from "@/components/ui/segmented-control";
import { Sheet } from "@/components/ui/sheet";
import { ApiError } from "@/lib/api-error";
import { productsQuery } from "@/lib/catalogue";
import { useChain } from "@/lib/chain";
import { useChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { comparisonQuery } from "../api/comparison";
import { comparedDrivers } from "../view/drivers";
import { regionGroups } from "../view/store-groups";
import { CurveComparison } from "./curve-comparison";
import { LevelComparison } from "./level-comparison";
import { UnlearntStores } from "./unlearnt-stores";
import { useStoresAddress } from "./use-stores-address";

/** One driver of a product across all its stores. */
export const StoresPage = () => {
  const format = useChainFormat();
  const level = useChain()?.intervalLevel ?? 0.8;
  const products = useQuery(productsQuery());
  const address = useStoresAddress();
  const { driver, store, anchor } = address;
  const product = address.product ?? products.data?.[0]?.code ?? "";
  const query = useQuery(comparisonQuery({ product, driver, level, anchor: driver === "price" ? anchor : undefined }));
  const { groups, of: groupOf } = useMemo(() => regionGroups(query.data?.stores ?? []), [query.data]);
  const known = products.data?.find((one) => one.code === product);
  const learnt = query.data?.stores.filter(({ curve }) => curve !== null).length ?? 0;
  const noModel = query.error instanceof ApiError && query.error.status === 422;
  const view = query.data && {
    comparison: query.data,
    driver,
    groups,
    groupOf,
    selected: store,
    onSelect: address.setStore,
  };
  return (
    <>
      <PageHeader
        title={known ? `${known.name} across ${learnt || "all"} stores` : "Stores"}
        facts={[
          "each store learnt by itself",
          "coloured by region",
          query.data?.anchor != null && `anchor ${format.price(query.data.anchor)}`,
        ].filter(Boolean)}
        actions={
          <>
            <Combobox
              label="Product"
              className="w-80 max-w-full"
              options={(products.data ?? []).map(({ code, name, categoryName }) => ({
                value: code,
                label: name,
                detail: categoryName,
              }))}
              value={product || null}
              onChange={address.setProduct}
              placeholder="Find a product"
            />
            {driver === "price" && query.data?.anchor != null && (
              <NumberField
                label="Anchor price"
                fieldClassName="w-28"
                value={query.data.anchor}
                min={0.01}
                step={0.05}
                format={format.price}
                onChange={address.setAnchor}
              />
            )}
            <SegmentedControl label="Driver" segments={comparedDrivers} value={driver} onChange={address.setDriver} />
          </>
        }
      />
      {noModel || products.data?.length === 0 ? (
        <Sheet>
          <EmptyState
            title={
              known
                ? `Nothing is learnt of ${known.name} yet`
                : products.data?.length
                  ? "There is no such product"
                  : "No products yet"
            }
            action={known && <LinkButton to={paths.drivers.href({ product })}>Go to its drivers</LinkButton>}
          >
            {known
              ? "Stores can be compared once a model of it is in use."
              : products.data?.length
                ? `No product has the code "${product}". Choose one above.`
                : "Once sales are loaded and drivers learnt, stores can be compared here."}
          </EmptyState>
        </Sheet>
      ) : (
        <QueryView query={query} loading="Comparing the stores" failure="The stores could not be compared">
          {() =>
            view && (
              <div className="flex flex-col gap-5">
                {view.comparison.chain === null ? (
                  <Sheet>
                    <EmptyState title="No store could learn this driver">
                      Choose another driver, or another product.
                    </EmptyState>
                  </Sheet>
                ) : typeof view.comparison.chain.x[0] === "string" ? (
                  <LevelComparison {...view} />
                ) : (
                  <CurveComparison {...view} />
                )}
                <UnlearntStores comparison={view.comparison} />
              </div>
            )
          }
        </QueryView>
      )}
    </>
  );
};
