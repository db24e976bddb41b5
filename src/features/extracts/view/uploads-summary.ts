import type { QueuedUpload } from "../api/upload-queue";

type Part = Pick<QueuedUpload, "state" | "file" | "sent">;

/** Whether it waits for its turn or is being sent. */
export const isUnderWay = ({ state }: Pick<QueuedUpload, "state">): boolean => state === "waiting" || state === "sending";

/** How many files are under way and what share of their bytes has gone up; null where none is. */
export const uploadsSummary = (uploads: readonly Part[]): { count: number; share: number } | null => {
  const underWay = uploads.filter(isUnderWay);
  if (underWay.length === 0) return null;
  const total = underWay.reduce((sum, { file }) => sum + file.size, 0);
  const sent = underWay.reduce((sum, upload) => sum + (upload.state === "sending" ? Math.min(upload.sent.bytes, upload.file.size) : 0), 0);
  return { count: underWay.length, share: total === 0 ? 0 : Math.floor((100 * sent) / total) / 100 };
};
