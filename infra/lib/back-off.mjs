const firstDelayMs = 500;
const longestDelayMs = 15_000;
const countedMs = 60_000;
const mostRestarts = 5;

/**
 * How long to wait before a part that ended by itself is started again: twice as long each time within a minute.
 * @param {number[]} endedAtMs when it ended, oldest first, the last one being now
 * @returns {number | null} null when it ended so often that another start is no use
 */
export function restartDelayMs(endedAtMs) {
  const now = endedAtMs.at(-1) ?? 0;
  const recent = endedAtMs.filter((at) => now - at < countedMs).length;
  if (recent > mostRestarts) return null;
  return Math.min(firstDelayMs * 2 ** (recent - 1), longestDelayMs);
}
