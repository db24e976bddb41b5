import type { Endpoint, ResponseOf } from "@shared/contract/endpoint";
import { readAnswer } from "./api-client";
import { readProblem, unreachable } from "./api-error";

export type UploadOptions = {
  form: FormData;
  /** Called with the bytes sent so far. */
  onProgress?: (sent: { bytes: number; totalBytes: number }) => void;
  signal?: AbortSignal;
};

/** Sends a form with a file; by XMLHttpRequest because fetch cannot tell how much has been sent. */
export function upload<E extends Endpoint>(endpoint: E, options: UploadOptions): Promise<ResponseOf<E>> {
  return new Promise((resolve, reject) => {
    const transport = new XMLHttpRequest();
    transport.open(endpoint.method, endpoint.path);
    transport.setRequestHeader("accept", "application/json");
    transport.upload.onprogress = (event) => options.onProgress?.({ bytes: event.loaded, totalBytes: event.total });
    transport.onerror = () => reject(unreachable());
    transport.onabort = () => reject(new DOMException("The upload was stopped.", "AbortError"));
    transport.onload = () => {
      const text = transport.responseText;
      const header = (name: string) => transport.getResponseHeader(name);
      if (transport.status < 200 || transport.status >= 300) {
        reject(readProblem({ status: transport.status, text, header }));
        return;
      }
      try {
        resolve(readAnswer(endpoint, text));
      } catch (error) {
        reject(error);
      }
    };
    options.signal?.addEventListener("abort", () => transport.abort(), { once: true });
    transport.send(options.form);
  });
}
