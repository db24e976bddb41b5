import { useMemo } from "react";
import type { Store } from "@shared/contract/catalogue";
import { Button } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";

type StoreChoiceProps = {
  stores: readonly Store[];
  chosen: ReadonlySet<string>;
  onChange: (chosen: ReadonlySet<string>) => void;
  error?: string;
};

/** Stores by region; a region can be taken as a whole. */
export const StoreChoice = ({ stores, chosen, onChange, error }: StoreChoiceProps) => {
  const regions = useMemo(() => byRegion(stores), [stores]);
  const set = (codes: readonly string[], isChosen: boolean) => {
    const next = new Set(chosen);
    for (const code of codes) {
      if (isChosen) next.add(code);
      else next.delete(code);
    }
    onChange(next);
  };
  const all = stores.map((store) => store.code);
  return (
    <fieldset data-invalid={error ? "" : undefined} aria-describedby={error ? "stores-error" : undefined}>
      <legend className="mb-1.5 font-medium">
        Stores <span className="font-normal text-muted">{chosen.size === 0 ? "none chosen" : `${chosen.size} of ${stores.length}`}</span>
      </legend>
      <div className="mb-3 flex gap-2">
        <Button size="small" onClick={() => set(all, true)}>
          All
        </Button>
        <Button size="small" onClick={() => set(all, false)}>
          None
        </Button>
      </div>
      <div className="grid max-h-96 gap-x-6 gap-y-4 overflow-y-auto rounded-md border border-hairline p-4 sm:grid-cols-3">
        {regions.map(([region, own]) => {
          const codes = own.map((store) => store.code);
          return (
            <div key={region} className="flex flex-col gap-1.5">
              <Checkbox
                label={<span className="font-semibold">{region}</span>}
                checked={codes.every((code) => chosen.has(code))}
                onChange={(event) => set(codes, event.target.checked)}
              />
              {own.map((store) => (
                <Checkbox
                  key={store.code}
                  label={store.name}
                  checked={chosen.has(store.code)}
                  onChange={(event) => set([store.code], event.target.checked)}
                />
              ))}
            </div>
          );
        })}
      </div>
      {error && (
        <p id="stores-error" role="alert" className="mt-1 text-sm text-danger">
          {error}
        </p>
      )}
    </fieldset>
  );
};

function byRegion(stores: readonly Store[]): [string, Store[]][] {
  const regions = new Map<string, Store[]>();
  for (const store of stores) {
    const own = regions.get(store.region) ?? [];
    own.push(store);
    regions.set(store.region, own);
  }
  return [...regions].sort(([one], [other]) => one.localeCompare(other));
}
