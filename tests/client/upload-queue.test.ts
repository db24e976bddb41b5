import { describe, expect, it, vi } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import { UploadQueue } from "@/features/extracts/api/upload-queue";
import type { SendFile } from "@/features/extracts/api/upload-queue";
import { fileProblem } from "@/features/extracts/view/file-problem";
import { kindFromHead } from "@/features/extracts/view/guess-kind";
import { uploadsSummary } from "@/features/extracts/view/uploads-summary";
import { ApiError } from "@/lib/api-error";
import { extractWith } from "./support/extract";

type Sent = Parameters<SendFile>[0] & { arrive: (extract: Extract) => void; fail: (error: unknown) => void };

/** A queue whose files wait until the test says what became of them. */
const queueOf = (names: string[]) => {
  const sent: Sent[] = [];
  const queue = new UploadQueue(
    (upload) =>
      new Promise((arrive, fail) => {
        sent.push({ ...upload, arrive, fail });
        upload.signal.addEventListener("abort", () => fail(new DOMException("", "AbortError")));
      }),
    () => 0,
  );
  queue.add(names.map((name) => ({ file: new File(["week"], name), kind: "sales", refusal: null })));
  const states = () => queue.snapshot().map(({ state }) => state);
  return { queue, sent, states };
};

describe("files on their way", () => {
  it("go up two at a time, the others in their turn, and tell those who watch", async () => {
    const { queue, sent, states } = queueOf(["a.csv", "b.csv", "c.csv"]);
    const told = vi.fn();
    queue.subscribe(told);
    expect(states()).toEqual(["chosen", "chosen", "chosen"]);
    queue.start();
    expect(states()).toEqual(["sending", "sending", "waiting"]);
    sent[0].onProgress({ bytes: 3 });
    expect(queue.snapshot()[0].sent.bytes).toBe(3);
    sent[0].arrive(extractWith());
    await vi.waitFor(() => expect(states()).toEqual(["arrived", "sending", "sending"]));
    expect(told).toHaveBeenCalled();
    expect(sent).toHaveLength(3);
  });

  it("that fail say why, and can be sent again as what the person says they hold", async () => {
    const { queue, sent, states } = queueOf(["a.csv"]);
    queue.start();
    sent[0].fail(new ApiError({ status: 0, code: "unreachable", detail: "x" }));
    await vi.waitFor(() => expect(states()).toEqual(["failed"]));
    const [{ id, problem }] = queue.snapshot();
    expect(problem).toBe("The connection broke before the whole file had arrived. Nothing was kept; try again.");
    queue.setKind(id, "stores");
    queue.retry(id);
    expect(sent[1].kind).toBe("stores");
    expect(queue.snapshot()[0].problem).toBeNull();
  });

  it("can be stopped, and those that wait go on without them", async () => {
    const { queue, sent, states } = queueOf(["a.csv", "b.csv", "c.csv"]);
    queue.start();
    queue.stop(queue.snapshot()[0].id);
    await vi.waitFor(() => expect(states()).toEqual(["failed", "sending", "sending"]));
    expect(queue.snapshot()[0].problem).toBe("Stopped. Nothing was kept.");
    queue.clear();
    expect(states()).toEqual([]);
    expect(sent.every(({ signal }) => signal.aborted)).toBe(true);
  });

  it("that are refused are never sent", () => {
    const { queue, sent } = queueOf([]);
    queue.add([{ file: new File([], "empty.csv"), kind: "sales", refusal: "The file is empty. Export it again." }]);
    expect(queue.start()).toEqual([]);
    expect(sent).toHaveLength(0);
  });

  it("are summed up by their bytes while they are under way, and by nothing once they are not", () => {
    const file = new File(["12345678"], "a.csv");
    const at = (state: "sending" | "waiting" | "arrived", bytes: number) => ({ file, state, sent: { bytes, atMs: 0 } });
    expect(uploadsSummary([at("sending", 4), at("waiting", 0)])).toEqual({ count: 2, share: 0.25 });
    // The form around a file adds some bytes to it.
    expect(uploadsSummary([at("sending", 300)])).toEqual({ count: 1, share: 1 });
    expect(uploadsSummary([at("arrived", 8)])).toBeNull();
  });
});

describe("a file's beginning", () => {
  const head = (...bytes: number[]) => new Uint8Array(bytes);
  const text = (words: string) => new TextEncoder().encode(words);

  it.each([
    ["nothing", head(), "The file is empty. Export it again."],
    ["a workbook", head(0x50, 0x4b, 3, 4, 0, 0), /workbook or an archive/],
    ["a PDF", text("%PDF-1.7"), "It is a PDF. Export the rows as CSV."],
    ["bytes that are no text", head(0x89, 0, 0, 0x4e, 0, 0), /not text/],
  ])("that is %s is refused with its reason", (_, bytes, reason) => {
    expect(fileProblem({ size: bytes.length, head: bytes }, undefined)).toMatch(reason);
  });

  it.each([
    ["plain text", text("week,store\n")],
    ["packed", head(0x1f, 0x8b, 0, 0, 0)],
    ["UTF-16 with its mark", head(0xff, 0xfe, 0x77, 0, 0x65, 0)],
    ["UTF-16 without it", head(0x77, 0, 0x65, 0, 0x65, 0)],
  ])("that is %s is let through", (_, bytes) => {
    expect(fileProblem({ size: bytes.length, head: bytes }, undefined)).toBeNull();
  });

  it("counts against the chain's limit, and says both sizes", () => {
    expect(fileProblem({ size: 3_000_000, head: text("week") }, 2_000_000)).toBe(
      "It has 3.0\u202FMB; at most 2.0\u202FMB are taken. Split it by weeks, or compress it as .csv.gz.",
    );
    expect(fileProblem({ size: 2_000_000, head: text("week") }, 2_000_000)).toBeNull();
  });

  it.each([
    ["store,name,region\nS1,Ashgill,Town\n", "stores"],
    ["event;name;first_day;last_day\nfair;Fair;01.10.2026;02.10.2026\n", "events"],
    ["week,store,product,units,net_sales,regular_price\n2026-06-01,S1,P1,3,5.37,1.79\n", "sales"],
    ["a,b\n1,2\n", null],
  ])("tells by its columns what it holds: %s", (words, kind) => {
    expect(kindFromHead(text(words))).toBe(kind);
  });
});
