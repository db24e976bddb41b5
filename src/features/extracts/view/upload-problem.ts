import { ApiError } from "@/lib/api-error";

/** What became of an upload that failed, and what to do. */
export const uploadProblem = (error: unknown): string => {
  if (error instanceof DOMException && error.name === "AbortError") return "Stopped. Nothing was kept.";
  if (!(error instanceof ApiError)) return "The file could not be sent. Nothing was kept; try again.";
  if (error.status === 0) return "The connection broke before the whole file had arrived. Nothing was kept; try again.";
  const fields = error.errors.map((field) => field.message).join(" ");
  return fields && !error.detail.includes(fields) ? `${error.detail} ${fields}` : error.detail;
};
