import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Extract } from "@shared/contract/extracts";
import type { TagTone } from "@/components/ui/tag";

type State = Extract["state"];

const stateWords: Record<State, { word: string; tone: TagTone }> = {
  received: { word: "Received", tone: "neutral" },
  checking: { word: "Checking", tone: "accent" },
  checked: { word: "Ready to load", tone: "accent" },
  unusable: { word: "Cannot be used", tone: "danger" },
  loading: { word: "Loading", tone: "accent" },
  loaded: { word: "Loaded", tone: "good" },
  withdrawn: { word: "Withdrawn", tone: "neutral" },
};

/** Codes of failures that a person mends by saying how the file is read. */
const layoutFailures = ["layout-needed", "layout-does-not-fit"];

/** Whether the file waits for someone to say which of its columns are ours. */
export const needsLayout = ({ state, failure }: Pick<Extract, "state" | "failure">): boolean =>
  state === "unusable" && failure !== null && layoutFailures.includes(failure.code);

/** What to call an extract's state, and how loud. */
export const describeState = (extract: Pick<Extract, "state" | "rows" | "failure" | "layout">): { word: string; tone: TagTone } => {
  const { state, rows, layout } = extract;
  if (needsLayout(extract)) return { word: "Columns to match", tone: "caution" };
  if ((state === "checked" || (state === "unusable" && rows)) && layout?.isConfirmed === false) return { word: "Reading to confirm", tone: "caution" };
  if (state === "checked" && rows && rows.usable === 0) return { word: "No usable rows", tone: "danger" };
  if (state === "checked" && rows && rows.errors > 0) return { word: "Ready, with errors", tone: "caution" };
  return stateWords[state];
};

/** Whether a job works on it, or soon will, so that it changes by itself. */
export const isInWork = ({ state, failure }: Pick<Extract, "state" | "failure">): boolean =>
  state === "checking" || state === "loading" || (state === "received" && failure === null);

export const kindNames: Record<ExtractKind, string> = {
  sales: "Sales",
  stores: "Stores",
  products: "Products",
  listings: "Listings",
  funding: "Funding",
  events: "Events",
  temperatures: "Temperatures",
};

/** What a file most likely holds, by its name; people correct it where it is wrong. */
export const kindFromName = (fileName: string): ExtractKind => {
  const name = fileName.toLowerCase();
  const named = (Object.keys(kindNames) as ExtractKind[]).find((kind) => name.includes(kind.slice(0, -1)));
  return named ?? (/weather|temp/.test(name) ? "temperatures" : "sales");
};
