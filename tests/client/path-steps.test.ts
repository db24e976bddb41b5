import { describe, expect, it } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import { changesNothing, changesSentence, withdrawalSentence } from "@/features/extracts/view/changes-summary";
import { pathSteps } from "@/features/extracts/view/path-steps";
import type { StepName } from "@/features/extracts/view/path-steps";
import { extractWith } from "./support/extract";

const steps = (part: Partial<Extract>) => new Map(pathSteps(extractWith(part), "Sales").map((step) => [step.name, step]));
const marks = (part: Partial<Extract>) => [...steps(part).values()].map(({ mark }) => mark);
const open = (part: Partial<Extract>) => [...steps(part).values()].filter(({ isOpen }) => isOpen).map(({ name }) => name);
const line = (part: Partial<Extract>, name: StepName) => steps(part).get(name)?.line;

const proposed: Extract["layout"] = { origin: "proposed", id: null, name: null, isConfirmed: false };

describe("the way of a file", () => {
  it("waits for its check, which is shown as it goes on", () => {
    const part = { state: "checking", layout: null, rows: null } as const;
    expect(marks(part)).toEqual(["done", "working", "working", "waiting", "waiting"]);
    expect(open(part)).toEqual(["wrong"]);
  });

  it("stops at how it is read where that was only worked out, and asks nothing else meanwhile", () => {
    const rows = { read: 10, usable: 8, errors: 2, warnings: 0 };
    expect(open({ layout: proposed, rows })).toEqual(["read"]);
    expect(marks({ layout: proposed, rows })).toEqual(["done", "now", "look", "waiting", "waiting"]);
  });

  it("stops there as well where needed columns are missing, in its own words and not as unusable", () => {
    const part: Partial<Extract> = { state: "unusable", rows: null, layout: proposed, failure: { code: "layout-needed", detail: "x" } };
    expect(marks(part)).toEqual(["done", "stopped", "waiting", "waiting", "waiting"]);
    expect(open(part)).toEqual(["read"]);
    expect(line(part, "read")).toBe("Not every column that is needed has been found");
  });

  it("leads to how the file is read first where, read as proposed, no row can be used", () => {
    const rows = { read: 60, usable: 0, errors: 60, warnings: 0 };
    const part: Partial<Extract> = { state: "unusable", rows, layout: proposed, failure: { code: "no-usable-rows", detail: "x" } };
    expect(marks(part)).toEqual(["done", "now", "look", "waiting", "waiting"]);
    expect(line(part, "wrong")).toBe("Read as above, no row can be used: look there first");
  });

  it("says why a file cannot be used at all", () => {
    const part: Partial<Extract> = { state: "unusable", rows: null, layout: null, failure: { code: "no-rows", detail: "x" } };
    expect(marks(part)).toEqual(["done", "waiting", "stopped", "waiting", "waiting"]);
  });

  it("opens what is wrong and what loading changes where a person decides, in counts", () => {
    const rows = { read: 1200, usable: 1198, errors: 3, warnings: 1 };
    expect(open({ rows })).toEqual(["wrong", "changes"]);
    expect(line({ rows }, "wrong")).toBe("3 errors, 1 warning: 1,198 of 1,200 rows can be used");
    expect(line({ rows }, "changes")).toBe("1,198 rows can be loaded");
    expect(open({})).toEqual(["changes"]);
    expect(line({}, "wrong")).toBe("Nothing: all 10 rows can be used");
    expect(line({ rows: { read: 2, usable: 2, errors: 0, warnings: 1 } }, "wrong")).toBe("1 warning; every row can be used");
  });

  it("stops where no row can be used", () => {
    expect(marks({ rows: { read: 2, usable: 0, errors: 2, warnings: 0 } })).toEqual(["done", "done", "look", "stopped", "waiting"]);
  });

  it("says that a broken load changed nothing", () => {
    const part = { failure: { code: "broke", detail: "x" } };
    expect(line(part, "changes")).toBe("The load broke down; nothing was changed");
    expect(open(part)).toEqual(["changes"]);
  });

  it("ends with what is loaded, or withdrawn", () => {
    expect(open({ state: "loaded" })).toEqual(["loaded"]);
    expect(marks({ state: "loaded" })).toEqual(["done", "done", "done", "done", "done"]);
    expect(line({ state: "withdrawn" }, "loaded")).toBe("Withdrawn: what was there before is back");
  });

  it.each([
    ["own", null, "In our own form: nothing to say"],
    ["saved", "Coast tills", "Recognised: read like \u201cCoast tills\u201d"],
    ["chosen", null, "As set for this file"],
    ["chosen", "Coast tills", "As set here, and kept as \u201cCoast tills\u201d"],
  ] as const)("says in a line how a file of origin %s (%s) is read", (origin, name, words) => {
    expect(line({ layout: { origin, id: null, name, isConfirmed: true } }, "read")).toBe(words);
  });
});

describe("what a load does", () => {
  const changes = (totals: { new: number; changed: number; same: number; missing: number }) => ({ totals });

  it("is said in a sentence, with the rows that the file leaves out", () => {
    expect(changesSentence(changes({ new: 144, changed: 4, same: 1, missing: 14 }), false)).toBe(
      "144 new rows, 4 rows changed, 1 row already there as it is. 14 rows of these weeks and stores are loaded but not in the file: they stay.",
    );
    expect(changesSentence(changes({ new: 2, changed: 0, same: 0, missing: 1 }), true)).toBe(
      "2 new rows. 1 row of these weeks and stores were not in the file and stayed.",
    );
  });

  it("is nothing where every row is there already", () => {
    const same = changes({ new: 0, changed: 0, same: 10, missing: 0 });
    expect(changesNothing(same)).toBe(true);
    expect(changesSentence(same, false)).toBe("Nothing would change: every row is there already.");
    expect(changesSentence(same, true)).toBe("It changed nothing: every row was there already.");
  });

  it("is taken back in so many words", () => {
    expect(withdrawalSentence(changes({ new: 144, changed: 1, same: 0, missing: 0 }))).toBe(
      "The 144 rows it added are taken out, and the 1 row it changed gets back what stood there before.",
    );
    expect(withdrawalSentence(changes({ new: 0, changed: 0, same: 3, missing: 0 }))).toMatch(/nothing goes back/);
    expect(withdrawalSentence(undefined)).toMatch(/is put back/);
  });
});
