import type { UnknownCodes } from "@shared/contract/unknown-codes";

export type UnknownCode = UnknownCodes["stores"][number];

/** What a person has written about a code; `detail` is the region of a store, the category of a product. */
export type Entry = { isChosen: boolean; name: string; detail: string };

export type Entries = Readonly<Record<string, Entry>>;

export const emptyEntry: Entry = { isChosen: false, name: "", detail: "" };

export const entryOf = (entries: Entries, code: string): Entry => entries[code] ?? emptyEntry;

/** Codes that are chosen, in the order of the list. */
export const chosenCodes = (codes: readonly UnknownCode[], entries: Entries): UnknownCode[] =>
  codes.filter(({ code }) => entryOf(entries, code).isChosen);

/** Whether something a chosen code needs is still empty. */
export const lacks = (codes: readonly UnknownCode[], entries: Entries): { names: number; details: number } => {
  const chosen = chosenCodes(codes, entries).map(({ code }) => entryOf(entries, code));
  return {
    names: chosen.filter(({ name }) => name.trim() === "").length,
    details: chosen.filter(({ detail }) => detail.trim() === "").length,
  };
};

/** The same detail for all that are chosen. */
export const fillDetail = (codes: readonly UnknownCode[], entries: Entries, detail: string): Entries => ({
  ...entries,
  ...Object.fromEntries(chosenCodes(codes, entries).map(({ code }) => [code, { ...entryOf(entries, code), detail }])),
});

/** Chooses all, or none. */
export const chooseAll = (codes: readonly UnknownCode[], entries: Entries, isChosen: boolean): Entries => ({
  ...entries,
  ...Object.fromEntries(codes.map(({ code }) => [code, { ...entryOf(entries, code), isChosen }])),
});

/** Writing about a code chooses it as well. */
export const writeEntry = (entries: Entries, code: string, part: Partial<Entry>): Entries => ({
  ...entries,
  [code]: { ...entryOf(entries, code), isChosen: true, ...part },
});
