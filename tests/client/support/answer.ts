import { vi } from "vitest";

type Answer = { status: number; body?: unknown; headers?: Record<string, string> };

/** Stands in for the server: each request gets the answer that `choose` gives for its address and options. */
export const answerRequests = (choose: (address: string, options: RequestInit) => Answer | "no answer") => {
  const asked = vi.fn((input: string | URL | Request, options: RequestInit = {}) => {
    const answer = choose(String(input), options);
    if (answer === "no answer") return Promise.reject(new TypeError("Failed to fetch"));
    const { status, body, headers = {} } = answer;
    const text = body === undefined ? null : typeof body === "string" ? body : JSON.stringify(body);
    return Promise.resolve(new Response(text, { status, headers }));
  });
  vi.stubGlobal("fetch", asked);
  return asked;
};

/** A refusal as problem details (RFC 9457). */
export const refusal = (status: number, detail: string, more: object = {}) => ({
  status,
  body: { type: "about:blank", title: "Refused", status, detail, code: "refused", requestId: "req-1", ...more },
});
