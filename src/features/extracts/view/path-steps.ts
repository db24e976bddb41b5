import type { Extract } from "@shared/contract/extracts";
import { countOf, formatNumber } from "@/lib/format/number";
import { isInWork, needsLayout } from "./extract-state";

/** The way of a file: what it is, how it is read, what is wrong with it, what loading changes, and that it is loaded. */
export type StepName = "file" | "read" | "wrong" | "changes" | "loaded";

/**
 * done: behind us; look: done, with something to look at; now: a person is asked; working: a job goes on;
 * stopped: it cannot go on by itself; waiting: not reached yet.
 */
export type StepMark = "done" | "look" | "now" | "working" | "stopped" | "waiting";

export type PathStep = { name: StepName; title: string; mark: StepMark; line: string; isOpen: boolean };

type Said = Pick<PathStep, "mark" | "line"> & { isOpen?: boolean };

const isUnconfirmed = ({ layout, state }: Extract) => layout?.isConfirmed === false && (state === "checked" || state === "unusable");

/** Each step as it stands, in words; the ones that ask for a person are open. */
export const pathSteps = (extract: Extract, arrived: string): PathStep[] => {
  const step = (name: StepName, title: string, { mark, line, isOpen = false }: Said): PathStep => ({ name, title, mark, line, isOpen });
  const isLoaded = extract.state === "loaded" || extract.state === "withdrawn";
  return [
    step("file", "File", { mark: "done", line: arrived }),
    step("read", "How it is read", reading(extract)),
    step("wrong", "What is wrong", wrong(extract)),
    step("changes", isLoaded ? "What loading changed" : "What loading changes", changes(extract)),
    step("loaded", "Loaded", loaded(extract)),
  ];
};

const reading = (extract: Extract): Said => {
  const { layout, state, failure } = extract;
  if (needsLayout(extract)) return { mark: "stopped", line: "Not every column that is needed has been found", isOpen: true };
  if (layout === null) {
    if (isInWork(extract)) return { mark: "working", line: "Being worked out" };
    if (state === "unusable") return { mark: "waiting", line: "No rows were found that could be read" };
    return failure ? { mark: "waiting", line: "Known after the check" } : { mark: "done", line: "In our own form" };
  }
  if (isUnconfirmed(extract)) {
    return { mark: "now", line: "Worked out from the file itself: look whether it is right", isOpen: true };
  }
  const lines = {
    own: "In our own form: nothing to say",
    saved: `Recognised: read like “${layout.name ?? "a saved layout"}”`,
    chosen: layout.name ? `As set here, and kept as “${layout.name}”` : "As set for this file",
    proposed: "As worked out from the file",
  };
  return { mark: "done", line: lines[layout.origin] };
};

const wrong = (extract: Extract): Said => {
  const { state, rows, failure } = extract;
  if (state === "received" && failure) return { mark: "stopped", line: "The check broke down", isOpen: true };
  if (state === "received" || state === "checking") return { mark: "working", line: "Checking the rows", isOpen: true };
  if (needsLayout(extract)) return { mark: "waiting", line: "Known once it is said how the file is read" };
  if (state === "unusable" && rows && isUnconfirmed(extract)) {
    return { mark: "look", line: "Read as above, no row can be used: look there first", isOpen: true };
  }
  if (state === "unusable") return { mark: "stopped", line: "This file cannot be used", isOpen: true };
  if (!rows) return { mark: "waiting", line: "Known after the check" };
  const isOpen = state === "checked" && !isUnconfirmed(extract) && rows.errors + rows.warnings > 0;
  const warnings = rows.warnings > 0 ? countOf(rows.warnings, "warning") : "";
  if (rows.errors > 0) {
    const usable = `${formatNumber(rows.usable)} of ${countOf(rows.read, "row")} can be used`;
    return { mark: "look", line: `${countOf(rows.errors, "error")}${warnings && `, ${warnings}`}: ${usable}`, isOpen };
  }
  if (warnings) return { mark: "done", line: `${warnings}; every row can be used`, isOpen };
  return { mark: "done", line: `Nothing: all ${countOf(rows.read, "row")} can be used` };
};

const changes = (extract: Extract): Said => {
  const { state, rows, failure } = extract;
  if (state === "loading") return { mark: "working", line: "Loading, all or nothing", isOpen: true };
  if (state === "loaded") return { mark: "done", line: rows ? `${countOf(rows.usable, "row")} taken in` : "Taken in" };
  if (state === "withdrawn") return { mark: "done", line: "Taken back" };
  if (state !== "checked" || !rows) return { mark: "waiting", line: "Known after the check" };
  if (rows.usable === 0) return { mark: "stopped", line: "No row can be used, so there is nothing to load" };
  if (isUnconfirmed(extract)) return { mark: "waiting", line: "First say how the file is read" };
  if (failure) return { mark: "stopped", line: "The load broke down; nothing was changed", isOpen: true };
  return { mark: "now", line: `${countOf(rows.usable, "row")} can be loaded`, isOpen: true };
};

const loaded = ({ state }: Extract): Said => {
  if (state === "loaded") return { mark: "done", line: "It counts from now on", isOpen: true };
  if (state === "withdrawn") return { mark: "look", line: "Withdrawn: what was there before is back", isOpen: true };
  return { mark: "waiting", line: "Not yet" };
};
