import { ApiError } from "@/lib/api-error";

/** What a refusal says, fields included; a break of another kind in plain words. */
export const problemSentence = (error: unknown): string => {
  if (!(error instanceof ApiError)) return "Something went wrong in this page. Nothing was changed; try again.";
  const fields = error.errors.map(({ message }) => message).filter((message) => !error.detail.includes(message));
  return [error.detail, ...fields].join(" ");
};
