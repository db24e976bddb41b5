import { mkdirSync, utimesSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { restartDelayMs } from "../../infra/lib/back-off.mjs";
import { hashSources } from "../../infra/lib/hash-sources.mjs";
import { folderNameFor } from "../../infra/lib/data-folder.mjs";
import { countStage, sum, summaryLine } from "../../infra/lib/test-count.mjs";
import { temporaryFolders } from "./temporary-folder";

const makeFolder = temporaryFolders();
const report = (figures: object) =>
  JSON.stringify({ numPassedTests: 0, numFailedTests: 0, numPendingTests: 0, numTodoTests: 0, ...figures });

describe("counting the tests of a stage", () => {
  it("takes the figures of the report", () => {
    expect(countStage({ report: report({ numPassedTests: 7 }), exitCode: 0 })).toEqual({ passed: 7, failed: 0 });
    expect(countStage({ report: report({ numPassedTests: 7, numFailedTests: 2 }), exitCode: 1 })).toEqual({ passed: 7, failed: 2 });
  });

  it("counts a stage that went wrong without a failed test as one failure", () => {
    expect(countStage({ report: report({ numPassedTests: 7 }), exitCode: 1 })).toEqual({ passed: 7, failed: 1 });
    expect(countStage({ report: null, exitCode: 1 })).toEqual({ passed: 0, failed: 1 });
    expect(countStage({ report: null, exitCode: 0 })).toEqual({ passed: 0, failed: 1 });
    expect(countStage({ report: '{"numPas', exitCode: 0 })).toEqual({ passed: 0, failed: 1 });
  });

  it("counts a skipped test as failed, unless some tests only were asked for", () => {
    const skipped = report({ numPassedTests: 7, numPendingTests: 2, numTodoTests: 1 });
    expect(countStage({ report: skipped, exitCode: 0 })).toEqual({ passed: 7, failed: 3 });
    expect(countStage({ report: skipped, exitCode: 0, isSelection: true })).toEqual({ passed: 7, failed: 0 });
  });

  it("ends in one line with the sums", () => {
    expect(summaryLine(sum([{ passed: 7, failed: 0 }, { passed: 5, failed: 1 }]))).toBe("12 passed, 1 failed");
    expect(summaryLine(sum([]))).toBe("0 passed, 0 failed");
  });
});

describe("starting a part again", () => {
  it("waits twice as long each time", () => {
    expect(restartDelayMs([0])).toBe(500);
    expect(restartDelayMs([0, 1_000])).toBe(1_000);
    expect(restartDelayMs([0, 1_000, 3_000, 6_000])).toBe(4_000);
  });

  it("is given up after five times within a minute", () => {
    expect(restartDelayMs([0, 1, 2, 3, 4])).toBe(8_000);
    expect(restartDelayMs([0, 1, 2, 3, 4, 5])).toBeNull();
  });

  it("forgets what is more than a minute ago", () => {
    expect(restartDelayMs([0, 1, 2, 3, 4, 60_010])).toBe(500);
  });
});

describe("the hash of sources", () => {
  function makeSources() {
    const root = makeFolder();
    mkdirSync(join(root, "src", "deep"), { recursive: true });
    writeFileSync(join(root, "src", "deep", "page.tsx"), "page");
    writeFileSync(join(root, "index.html"), "html");
    return root;
  }
  const paths = ["src", "index.html", "missing"];

  it("is the same for the same contents, whatever their times", () => {
    const [one, other] = [makeSources(), makeSources()];
    utimesSync(join(other, "index.html"), 1, 1);
    expect(hashSources(one, paths)).toBe(hashSources(other, paths));
  });

  it.each([
    ["a content changes", (root: string) => writeFileSync(join(root, "src/deep/page.tsx"), "paGe")],
    ["a file comes", (root: string) => writeFileSync(join(root, "src/new.ts"), "")],
    ["a missing path comes", (root: string) => writeFileSync(join(root, "missing"), "")],
  ])("changes when %s", (_what, change) => {
    const root = makeSources();
    const before = hashSources(root, paths);
    change(root);
    expect(hashSources(root, paths)).not.toBe(before);
  });
});

describe("the folder for a checkout's data elsewhere", () => {
  it("has a name of its own for every checkout", () => {
    expect(folderNameFor("/root/shelftide")).toMatch(/^[0-9a-f]{16}$/);
    expect(folderNameFor("/root/shelftide")).not.toBe(folderNameFor("/root/shelftide2"));
  });
});
