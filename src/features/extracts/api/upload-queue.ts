import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Extract } from "@shared/contract/extracts";
import { uploadProblem } from "../view/upload-problem";

/** chosen -> waiting -> sending -> arrived | failed; a failed or stopped one can be sent again. */
export type UploadState = "chosen" | "waiting" | "sending" | "arrived" | "failed";

export type QueuedUpload = {
  id: string;
  file: File;
  kind: ExtractKind;
  state: UploadState;
  /** Why it is not sent at all. */
  refusal: string | null;
  /** Why the last attempt ended without it. */
  problem: string | null;
  sent: { bytes: number; atMs: number };
  extract: Extract | null;
};

export type SendFile = (upload: {
  file: File;
  kind: ExtractKind;
  signal: AbortSignal;
  onProgress: (sent: { bytes: number }) => void;
}) => Promise<Extract>;

export type ChosenFile = Pick<QueuedUpload, "file" | "kind" | "refusal">;

/** So many files go up at the same time; the others wait for their turn. */
const atOnce = 2;

/** Files on their way to the server, kept apart from any page so that they go on while people look at others. */
export class UploadQueue {
  private uploads: readonly QueuedUpload[] = [];
  private readonly listeners = new Set<() => void>();
  private readonly stops = new Map<string, AbortController>();
  private made = 0;

  constructor(private readonly send: SendFile, private readonly now: () => number = Date.now) {}

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  readonly snapshot = (): readonly QueuedUpload[] => this.uploads;

  add(files: readonly ChosenFile[]): void {
    const added = files.map((file): QueuedUpload => ({
      ...file, id: `upload-${(this.made += 1)}`, state: "chosen", problem: null, sent: { bytes: 0, atMs: this.now() }, extract: null,
    }));
    this.set([...this.uploads, ...added]);
  }

  setKind(id: string, kind: ExtractKind): void {
    this.change(id, { kind });
  }

  /** Starts all that are chosen and may be sent; answers their ids. */
  start(): string[] {
    const ready = this.uploads.filter(({ state, refusal }) => state === "chosen" && refusal === null).map(({ id }) => id);
    this.set(this.uploads.map((upload) => (ready.includes(upload.id) ? { ...upload, state: "waiting" } : upload)));
    this.next();
    return ready;
  }

  retry(id: string): void {
    this.change(id, { state: "waiting", problem: null });
    this.next();
  }

  /** Ends one that is under way; it stays in the list and can be sent again. */
  stop(id: string): void {
    const upload = this.uploads.find((one) => one.id === id);
    if (upload?.state === "waiting") this.change(id, { state: "chosen" });
    this.stops.get(id)?.abort();
  }

  remove(id: string): void {
    this.stops.get(id)?.abort();
    this.set(this.uploads.filter((upload) => upload.id !== id));
  }

  /** Ends everything, as when a person signs out. */
  clear(): void {
    this.stops.forEach((stop) => stop.abort());
    this.set([]);
  }

  private next(): void {
    const busy = this.uploads.filter(({ state }) => state === "sending").length;
    const waiting = this.uploads.filter(({ state }) => state === "waiting");
    waiting.slice(0, Math.max(0, atOnce - busy)).forEach((upload) => void this.sendOne(upload));
  }

  private async sendOne({ id, file, kind }: QueuedUpload): Promise<void> {
    const stop = new AbortController();
    this.stops.set(id, stop);
    this.change(id, { state: "sending", sent: { bytes: 0, atMs: this.now() } });
    try {
      const onProgress = ({ bytes }: { bytes: number }) => this.change(id, { sent: { bytes, atMs: this.now() } });
      const extract = await this.send({ file, kind, signal: stop.signal, onProgress });
      this.change(id, { state: "arrived", extract });
    } catch (error) {
      this.change(id, { state: "failed", problem: uploadProblem(error) });
    } finally {
      this.stops.delete(id);
      this.next();
    }
  }

  private change(id: string, part: Partial<QueuedUpload>): void {
    this.set(this.uploads.map((upload) => (upload.id === id ? { ...upload, ...part } : upload)));
  }

  private set(uploads: readonly QueuedUpload[]): void {
    this.uploads = uploads;
    this.listeners.forEach((listener) => listener());
  }
}
