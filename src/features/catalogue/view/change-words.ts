import type { CatalogueChange } from "@shared/contract/catalogue-history";
import type { ChainFormat } from "@/lib/format/chain-format";
import { exactMoney, fromWords, taxWords } from "./product-words";

type Value = string | number | boolean | null;
type Values = NonNullable<CatalogueChange["after"]>;

const thing: Record<CatalogueChange["what"], string> = {
  store: "the store", product: "the product", category: "the category", terms: "the terms", funding: "the funding",
  listing: "the listing", event: "the event", temperature: "the temperature",
};

const verb = { added: "entered", changed: "changed", removed: "removed" } as const;

const fieldNames: Record<string, string> = {
  name: "name", region: "region", opened: "first day of trade", closed: "last day of trade", gtin: "GTIN", brand: "brand", category: "category",
  soldByWeight: "sold by weight", replaces: "product replaced", replacesSizeRatio: "size ratio", validFrom: "valid from", unitCost: "cost",
  regularPrice: "regular price", taxRate: "tax", store: "store", firstDay: "first day", lastDay: "last day", perUnit: "per unit", lumpSum: "lump sum",
  week: "week", temperatureC: "temperature",
};

const amounts = new Set(["unitCost", "regularPrice", "perUnit", "lumpSum"]);
const days = new Set(["opened", "closed", "firstDay", "lastDay", "week"]);

/** A value as people write it. */
const written = (field: string, value: Value | undefined, format: ChainFormat): string => {
  if (value === null || value === undefined || value === "") return "nothing";
  if (typeof value === "boolean") return value ? "yes" : "no";
  if (typeof value === "number") {
    if (amounts.has(field)) return exactMoney(value, format);
    if (field === "taxRate") return taxWords(value, format);
    if (field === "temperatureC") return format.temperature(value);
    return String(value);
  }
  if (field === "validFrom") return fromWords({ validFrom: value }, format);
  return days.has(field) ? format.day(value) : value;
};

/** What says which of several it was: a listing's store and first day, terms' day, a temperature's week. */
const which = (what: CatalogueChange["what"], values: Values, format: ChainFormat): string => {
  const say = (field: string) => written(field, values[field], format);
  if (what === "terms") return ` from ${say("validFrom")}`;
  if (what === "listing") return ` in ${say("store")} from ${say("firstDay")}`;
  if (what === "funding" || what === "event") return ` from ${say("firstDay")}`;
  return what === "temperature" ? ` of the week of ${say("week")}` : "";
};

const keys: Record<CatalogueChange["what"], readonly string[]> = {
  store: [], product: [], category: [], terms: ["validFrom"], funding: ["firstDay"], listing: ["store", "firstDay"], event: [], temperature: ["week", "region", "store"],
};

/** "changed the terms from 1 June 2026" */
export const changeSentence = (change: CatalogueChange, format: ChainFormat): string => {
  const values = change.after ?? change.before;
  return `${verb[change.change]} ${thing[change.what]}${values ? which(change.what, values, format) : ""}`;
};

const things: Record<CatalogueChange["what"], string> = {
  store: "stores", product: "products", category: "categories", terms: "terms", funding: "contributions", listing: "listings", event: "events", temperature: "temperatures",
};

/** "entered 24 listings" */
export const manySentence = ({ what, change }: CatalogueChange, count: number): string => `${verb[change]} ${count} ${things[what]}`;

/** What became of each field that changed: "regular price: €1.79 → €1.99". Of a new row what it has, of a removed one what it had. */
export const changeDetails = ({ what, before, after }: CatalogueChange, format: ChainFormat): string[] => {
  const fields = Object.keys({ ...before, ...after }).filter((field) => !keys[what].includes(field) || (before && after));
  return fields.flatMap((field) => {
    const [was, is] = [before?.[field], after?.[field]];
    const name = fieldNames[field] ?? field;
    if (before && after) return was === is ? [] : [`${name}: ${written(field, was, format)} → ${written(field, is, format)}`];
    const only = after ? is : was;
    return only === null || only === undefined || only === "" || only === false ? [] : [`${name}: ${written(field, only, format)}`];
  });
};
