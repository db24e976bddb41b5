import type { Services } from "../../services";
import { ProblemError } from "../../errors";

const patienceMs = 3_000;

/** Asks the database for a sign of life. @throws ProblemError 503 where none comes within three seconds. */
export async function checkHealth({ pool, logger }: Services): Promise<{ status: "ok" }> {
  let timer: NodeJS.Timeout | undefined;
  const tooLong = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new Error("no answer in time")), patienceMs);
  });
  try {
    await Promise.race([pool.query("select 1"), tooLong]);
    return { status: "ok" };
  } catch (error) {
    logger.error({ err: error }, "the database does not answer");
    throw new ProblemError({
      status: 503,
      code: "database-unreachable",
      detail: "The database cannot be reached. Try again in a moment.",
    });
  } finally {
    clearTimeout(timer);
  }
}
