import { type ExtractKind } from "@shared/contract/extract-kinds";
import { getExtract, listExtractIssues, listExtracts, loadExtract, uploadExtract, type Extract } from "@shared/contract/extracts";
import { createHash } from "node:crypto";
import { readFile } from "node:fs/promises";
import { basename } from "node:path";
import { answerOf, type ApiClient } from "./api-client";

/**
 * Uploads a file, waits for its check and loads it: what a data admin does by hand. A file that is loaded already, to
 * the byte, is left alone.
 *
 * @throws Error where the check finds a row that cannot be used
 */
export async function loadFile(
  client: ApiClient, { path, kind }: { path: string; kind: ExtractKind },
): Promise<Extract> {
  const bytes = await readFile(path);
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const known = answerOf(listExtracts, await client.call({ method: "GET", path: "/api/extracts" }));
  const loaded = known.items.find((extract) => extract.state === "loaded" && extract.sha256 === sha256);
  if (loaded) return loaded;

  const form = new FormData();
  form.set("kind", kind);
  form.set("file", new Blob([bytes]), basename(path));
  const { id, jobId } = answerOf(uploadExtract, await client.call({ method: "POST", path: "/api/extracts", form }));
  if (jobId !== null) await client.finished(jobId);
  await requireClean(client, id);
  // The generator is trusted: where other sales are there already, its own are meant to take their place.
  const accepted = answerOf(loadExtract, await client.call({ method: "POST", path: `/api/extracts/${id}/load`, json: { secondLook: true } }));
  await client.finished(accepted.jobId);
  return readExtract(client, id);
}

async function readExtract(client: ApiClient, id: string): Promise<Extract> {
  return answerOf(getExtract, await client.call({ method: "GET", path: `/api/extracts/${id}` }));
}

async function requireClean(client: ApiClient, id: string): Promise<void> {
  const extract = await readExtract(client, id);
  if (extract.state === "checked" && extract.rows?.errors === 0) return;
  const answer = await client.call({ method: "GET", path: `/api/extracts/${id}/issues?limit=3` });
  const issues = answerOf(listExtractIssues, answer).items.map((issue) => `line ${issue.line}: ${issue.reason}`);
  const reason = extract.failure?.detail ?? (issues.join("; ") || `it is ${extract.state}`);
  throw new Error(`${extract.fileName} cannot be loaded: ${reason}`);
}
