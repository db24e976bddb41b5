import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import type { FormEvent } from "react";
import { flushSync } from "react-dom";
import type { Product, Store } from "@shared/contract/catalogue";
import type { Chain } from "@shared/contract/chain";
import type { Scenario } from "@shared/contract/scenarios";
import type { WeekStart } from "@shared/calendar";
import { Button } from "@/components/ui/button";
import { Combobox } from "@/components/ui/combobox";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { LinkButton } from "@/components/ui/link-button";
import { Notice } from "@/components/ui/notice";
import { NumberField } from "@/components/ui/number-field";
import { Sheet } from "@/components/ui/sheet";
import { LoadingState } from "@/components/ui/skeleton";
import { TextField } from "@/components/ui/text-field";
import { ApiError } from "@/lib/api-error";
import { productsQuery, storesQuery } from "@/lib/catalogue";
import { chainQuery } from "@/lib/chain";
import { useChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { useCreateScenario } from "../api/create-scenario";
import { lastWeekOf, mostWeeks, nextWeek, weekChoices } from "../view/new-scenario";
import { StoreChoice } from "./store-choice";

type Preset = { product?: string; store?: string };
type NewScenarioProps = { today: string; preset: Preset; onCreated: (scenario: Scenario) => void };

/** Asks what a scenario is about; everything else is set on its page. */
export const NewScenario = (props: NewScenarioProps) => {
  const products = useQuery(productsQuery());
  const stores = useQuery(storesQuery());
  const chain = useQuery(chainQuery());
  const failed = [products, stores, chain].find((query) => query.isError);
  if (failed) return <ErrorState error={failed.error} title="Products and stores could not be read." onRetry={() => void failed.refetch()} />;
  if (!products.data || !stores.data || !chain.data) return <LoadingState label="Reading products and stores" />;
  if (products.data.length === 0 || stores.data.length === 0) {
    return (
      <EmptyState title="No products or stores yet" action={<LinkButton to={paths.extracts.href()}>Go to the extracts</LinkButton>}>
        Load stores, products and past sales first: a plan is predicted from them.
      </EmptyState>
    );
  }
  return <NewScenarioForm {...props} products={products.data} stores={stores.data} chain={chain.data} />;
};

type FormProps = NewScenarioProps & { products: Product[]; stores: Store[]; chain: Chain };

const NewScenarioForm = ({ today, preset, onCreated, products, stores, chain }: FormProps) => {
  const format = useChainFormat();
  const weekStart = chain.weekStart as WeekStart;
  const [name, setName] = useState("");
  const [product, setProduct] = useState<string | null>(preset.product ?? null);
  const [chosen, setChosen] = useState<ReadonlySet<string>>(() => new Set(preset.store ? [preset.store] : []));
  const [first, setFirst] = useState(() => nextWeek(today, weekStart));
  const [count, setCount] = useState(4);
  const [isTried, setTried] = useState(false);
  const create = useCreateScenario();
  const weeks = useMemo(
    () => weekChoices(today, weekStart).map((week) => ({ value: week, label: format.weekSpan(week, week), detail: format.weekDays(week) })),
    [today, weekStart, format],
  );
  const faults = {
    name: name.trim() ? undefined : "Give the scenario a name.",
    product: product ? undefined : "Choose a product.",
    stores: chosen.size > 0 ? undefined : "Choose at least one store.",
  };
  const shown: Partial<typeof faults> = isTried ? faults : {};
  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    // The messages stand before the first of them takes the focus.
    flushSync(() => setTried(true));
    if (!product || faults.name || faults.stores) {
      event.currentTarget.querySelector<HTMLElement>('[aria-invalid="true"], [data-invalid] input')?.focus();
      return;
    }
    const order = stores.map((store) => store.code).filter((code) => chosen.has(code));
    const draft = { name: name.trim(), product, stores: order, weeks: { first, last: lastWeekOf(first, count) }, cells: [], fixedCost: 0 };
    create.mutate(draft, { onSuccess: onCreated });
  };
  return (
    <Sheet>
      <form noValidate onSubmit={submit} className="flex flex-col gap-5">
        <div className="grid gap-5 md:grid-cols-2">
          <TextField label="Name" placeholder="For example: Midsummer lemonade" value={name} maxLength={120} error={shown.name} onChange={(event) => setName(event.target.value)} />
          <Combobox
            label="Product"
            placeholder="Type a part of its name"
            options={products.map(({ code, name: label, categoryName }) => ({ value: code, label, detail: categoryName }))}
            value={product}
            error={shown.product}
            onChange={setProduct}
          />
          <Combobox label="First week" options={weeks} value={first} onChange={setFirst} />
          <NumberField
            label="Number of weeks"
            hint={`To ${format.weekDays(lastWeekOf(first, count))}`}
            value={count}
            min={1}
            max={mostWeeks}
            onChange={(value) => setCount(Math.round(value ?? 1))}
          />
        </div>
        <StoreChoice stores={stores} chosen={chosen} onChange={setChosen} error={shown.stores} />
        {create.isError && (
          <Notice tone="danger" role="alert">
            {create.error instanceof ApiError ? create.error.detail : "The scenario was not made. Try again."}
          </Notice>
        )}
        <div className="flex justify-end gap-3">
          <LinkButton to={paths.scenarios.href()}>Cancel</LinkButton>
          <Button type="submit" tone="primary" busy={create.isPending}>
            Make the scenario
          </Button>
        </div>
      </form>
    </Sheet>
  );
};
