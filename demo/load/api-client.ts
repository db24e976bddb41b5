import { signIn } from "@shared/contract/accounts";
import { problemSchema } from "@shared/contract/common";
import type { Endpoint, ResponseOf } from "@shared/contract/endpoint";
import { getJob, type Job } from "@shared/contract/jobs";

type Call = { method: "GET" | "POST" | "PUT"; path: string; json?: unknown; form?: FormData };

/** What came back from a call that succeeded. */
export type Answer = { status: number; location: string | null; body: unknown };

/** Calls the application over HTTP, as one person or script. */
export type ApiClient = {
  /** @throws Error with the problem's sentence and code where the application refuses. */
  call(call: Call): Promise<Answer>;
  /** Waits until a job has ended. @throws Error where it failed, was cancelled or takes longer than the limit. */
  finished(jobId: string): Promise<Job>;
};

const pollEveryMs = 100;
const jobLimitMs = 300_000;

/** What an endpoint answered, checked against the contract. @throws ZodError where it is not what was promised. */
export function answerOf<E extends Endpoint>(endpoint: E, { body }: Answer): ResponseOf<E> {
  if (!endpoint.response) throw new Error(`${endpoint.method} ${endpoint.path} answers nothing that could be read.`);
  return endpoint.response.parse(body) as ResponseOf<E>;
}

/** A client that sends the headers given with each call: a session's cookie or an access token. */
export function createApiClient({ url, headers }: { url: string; headers: Record<string, string> }): ApiClient {
  const call = async ({ method, path, json, form }: Call): Promise<Answer> => {
    const response = await fetch(url + path, {
      method,
      headers: json === undefined ? headers : { ...headers, "content-type": "application/json" },
      body: form ?? (json === undefined ? undefined : JSON.stringify(json)),
    });
    if (!response.ok) throw new Error(`${method} ${path}: ${await complaintOf(response)}`);
    const text = await response.text();
    return {
      status: response.status,
      location: response.headers.get("location"),
      body: text === "" ? null : (JSON.parse(text) as unknown),
    };
  };
  return { call, finished: (jobId) => waitForJob(call, jobId) };
}

/** Signs a person in and gives the client of their session. */
export async function signedIn(
  { url, email, password }: { url: string; email: string; password: string },
): Promise<ApiClient> {
  const response = await fetch(url + signIn.path, {
    method: signIn.method,
    headers: { "content-type": "application/json" },
    body: JSON.stringify({ email, password }),
  });
  if (!response.ok) throw new Error(`${email} could not sign in: ${await complaintOf(response)}`);
  const cookie = response.headers.getSetCookie().map((line) => line.split(";")[0]).join("; ");
  return createApiClient({ url, headers: { cookie } });
}

async function complaintOf(response: Response): Promise<string> {
  const text = await response.text();
  try {
    const problem = problemSchema.parse(JSON.parse(text));
    return `${problem.detail} (${problem.code})`;
  } catch {
    return `status ${response.status}`;
  }
}

async function waitForJob(call: ApiClient["call"], jobId: string): Promise<Job> {
  const limit = Date.now() + jobLimitMs;
  while (Date.now() < limit) {
    const job = answerOf(getJob, await call({ method: "GET", path: `/api/jobs/${jobId}` }));
    if (job.state === "succeeded") return job;
    if (job.state === "failed" || job.state === "cancelled") {
      throw new Error(`Job ${job.kind} ${job.state}: ${job.error?.detail ?? "no reason given"}`);
    }
    await new Promise((resolve) => setTimeout(resolve, pollEveryMs));
  }
  throw new Error(`Job ${jobId} has not ended after ${jobLimitMs / 1000} s.`);
}
