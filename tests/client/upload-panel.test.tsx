import { screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { UploadPanel } from "@/features/extracts/components/upload/upload-panel";
import { UploadsUnderWay } from "@/features/extracts/components/upload/uploads-under-way";
import { UploadsProvider } from "@/features/extracts/api/uploads";
import { extractWith } from "./support/extract";
import { renderInPage } from "./support/render";

type Transport = { form: FormData; answer: (status: number, body: unknown) => void; progress: (loaded: number) => void };
let transports: Transport[] = [];

/** Stands in for XMLHttpRequest: each upload waits until the test answers it. */
class UploadTransport {
  upload: { onprogress?: (event: { loaded: number; total: number }) => void } = {};
  onload?: () => void;
  onabort?: () => void;
  status = 0;
  responseText = "";
  open = vi.fn();
  setRequestHeader = vi.fn();
  getResponseHeader = () => null;
  abort = () => this.onabort?.();
  send(form: FormData) {
    transports.push({
      form,
      progress: (loaded) => this.upload.onprogress?.({ loaded, total: 8 }),
      answer: (status, body) => {
        this.status = status;
        this.responseText = JSON.stringify(body);
        this.onload?.();
      },
    });
  }
}

beforeEach(() => {
  transports = [];
  vi.stubGlobal("XMLHttpRequest", UploadTransport);
});
afterEach(() => vi.unstubAllGlobals());

const show = () => {
  const onArrived = vi.fn();
  const { container } = renderInPage(
    <UploadsProvider>
      <UploadsUnderWay />
      <UploadPanel limitBytes={1000} onArrived={onArrived} />
    </UploadsProvider>,
  );
  const input = container.querySelector<HTMLInputElement>("input[type=file]");
  if (!input) throw new Error("The panel has no field for files.");
  return { onArrived, choose: (...files: File[]) => userEvent.upload(input, files) };
};

const csv = (name: string, text: string) => new File([text], name, { type: "text/csv" });
const stores = csv("north.csv", "store,name,region\nS1,Ashgill,Town\n");
const sales = csv("week.csv", "week,store\n");

describe("uploading files", () => {
  it("guesses what each holds, takes a correction, and opens a file that was sent alone", async () => {
    const { onArrived, choose } = show();
    await choose(stores);
    const kind = await screen.findByLabelText<HTMLSelectElement>("What north.csv holds", {}, { timeout: 8000 });
    expect(kind.value).toBe("stores");
    await userEvent.selectOptions(kind, "products");
    await userEvent.click(screen.getByRole("button", { name: "Upload" }));
    expect(transports[0].form.get("kind")).toBe("products");
    transports[0].answer(202, extractWith());
    await vi.waitFor(() => expect(onArrived).toHaveBeenCalledWith(extractWith()));
    expect(screen.queryByRole("list", { name: "Files to upload" })).toBeNull();
  });

  it("sends several, shows how far they are on every page, and says what became of each", async () => {
    const { onArrived, choose } = show();
    await choose(stores, sales);
    await userEvent.click(await screen.findByRole("button", { name: "Upload 2 files" }));
    transports[0].progress(stores.size);
    expect(await screen.findByRole("link", { name: /^2 uploads/ })).toBeTruthy();
    transports[0].answer(202, extractWith());
    transports[1].answer(415, { type: "about:blank", title: "x", status: 415, detail: "The file is no CSV.", code: "not-csv", requestId: "r" });
    expect(await screen.findByRole("link", { name: "See its check" })).toBeTruthy();
    expect(screen.getByText("The file is no CSV.")).toBeTruthy();
    expect(onArrived).not.toHaveBeenCalled();
    await userEvent.click(screen.getByRole("button", { name: "Try again" }));
    expect(transports).toHaveLength(3);
  });

  it("says beside a file why it cannot be sent, and sends the others", async () => {
    const { choose } = show();
    await choose(csv("empty.csv", ""), csv("large.csv", "x".repeat(1001)), sales);
    expect(await screen.findByText("The file is empty. Export it again.")).toBeTruthy();
    expect(screen.getByText(/at most 1\.0/)).toBeTruthy();
    await userEvent.click(screen.getByRole("button", { name: "Upload" }));
    expect(transports).toHaveLength(1);
  });

  it("can be stopped, and asks before the tab is closed meanwhile", async () => {
    const { choose } = show();
    await choose(sales);
    await userEvent.click(await screen.findByRole("button", { name: "Upload" }));
    const leaving = new Event("beforeunload", { cancelable: true });
    window.dispatchEvent(leaving);
    expect(leaving.defaultPrevented).toBe(true);
    await userEvent.click(screen.getByRole("button", { name: "Stop" }));
    expect(await screen.findByText("Stopped. Nothing was kept.")).toBeTruthy();
    const later = new Event("beforeunload", { cancelable: true });
    window.dispatchEvent(later);
    expect(later.defaultPrevented).toBe(false);
  });

  it("takes files that are dropped anywhere on the page, and says so while they hover", async () => {
    show();
    const drag = (type: string) => {
      const event = new Event(type, { bubbles: true, cancelable: true });
      Object.assign(event, { dataTransfer: { types: ["Files"], files: [sales] } });
      return event;
    };
    window.dispatchEvent(drag("dragover"));
    expect(await screen.findByText("Let go anywhere on this page")).toBeTruthy();
    window.dispatchEvent(drag("drop"));
    expect(await screen.findByLabelText("What week.csv holds")).toBeTruthy();
    expect(screen.queryByText("Let go anywhere on this page")).toBeNull();
  });
});
