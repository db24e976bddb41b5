/** What merging rows into a table does, or would do. */
export type MergeCounts = { new: number; changed: number; same: number };
