import { useState } from "react";

type Progress = { done: number; total: number | null; atMs: number };

/** Seconds left at the pace since first seen; null until there is a pace to go by. */
export const secondsLeft = (first: Progress, now: Progress): number | null => {
  const elapsedMs = now.atMs - first.atMs;
  const advanced = now.done - first.done;
  if (now.total === null || elapsedMs < 1500 || advanced <= 0) return null;
  return ((now.total - now.done) / advanced) * (elapsedMs / 1000);
};

/** By this page's own clock: the server's may differ. */
export const useTimeLeft = (now: Progress): number | null => {
  const [first] = useState(now);
  return secondsLeft(first, now);
};
