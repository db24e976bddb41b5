import { useSearchParams } from "react-router-dom";

/** What the address holds of a list's filters, so that it can be sent to a colleague. */
export const useFilters = <Name extends string>(names: readonly Name[]) => {
  const [search, setSearch] = useSearchParams();
  const values = Object.fromEntries(names.map((name) => [name, search.get(name) ?? ""])) as Record<Name, string>;
  const set = (changes: Partial<Record<Name, string | null>>) => {
    setSearch((current) => {
      const next = new URLSearchParams(current);
      for (const [name, value] of Object.entries<string | null | undefined>(changes)) {
        if (value) next.set(name, value);
        else next.delete(name);
      }
      return next;
    }, { replace: true, preventScrollReset: true });
  };
  return { values, set };
};
