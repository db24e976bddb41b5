/** Tells how far a check or load is; throws where it is to stop. */
export type Progress = (state: { done: number; total?: number | null; message?: string }) => Promise<void>;

/** For callers that do not watch. */
export const quietly: Progress = async () => undefined;
