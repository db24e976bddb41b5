import type { Store } from "@shared/contract/catalogue";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { regionsOf } from "../view/regions";

type StorePicksProps = { stores: readonly Store[]; chosen: readonly string[]; onChange: (codes: string[]) => void; error?: string };

/** Some of the stores, by region. */
export const StorePicks = ({ stores, chosen, onChange, error }: StorePicksProps) => {
  const regions = regionsOf(stores);
  const picked = new Set(chosen);
  const set = (codes: readonly string[], isIn: boolean) => {
    const next = new Set(picked);
    for (const code of codes) {
      if (isIn) next.add(code);
      else next.delete(code);
    }
    onChange(stores.map(({ code }) => code).filter((code) => next.has(code)));
  };
  return (
    <fieldset className="min-w-0">
      <legend className="mb-1.5 flex w-full items-center justify-between text-sm font-medium">
        <span>Stores ({chosen.length} of {stores.length})</span>
        <Button size="small" tone="quiet" onClick={() => set(stores.map(({ code }) => code), chosen.length < stores.length)}>
          {chosen.length < stores.length ? "All" : "None"}
        </Button>
      </legend>
      <div className="max-h-56 overflow-y-auto rounded-sm border border-control p-3" tabIndex={0} role="region" aria-label="Stores to choose from">
        {regions.map((region) => {
          const own = stores.filter((store) => store.region === region);
          return (
            <div key={region} className="mb-3 last:mb-0">
              <Checkbox
                label={<span className="font-semibold">{region}</span>} checked={own.every(({ code }) => picked.has(code))}
                onChange={({ target }) => set(own.map(({ code }) => code), target.checked)}
              />
              <div className="mt-1 grid gap-1 pl-6 sm:grid-cols-2">
                {own.map(({ code, name }) => (
                  <Checkbox key={code} label={`${code} ${name}`} checked={picked.has(code)} onChange={({ target }) => set([code], target.checked)} />
                ))}
              </div>
            </div>
          );
        })}
      </div>
      {error && <p className="mt-1.5 text-sm font-medium text-danger" role="alert">{error}</p>}
    </fieldset>
  );
};
