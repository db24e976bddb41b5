import { pause } from "../command.mjs";
import { sentenceFor } from "../problem.mjs";
import { restartDelayMs } from "../back-off.mjs";
import { dataOf, startCluster } from "./cluster.mjs";
import { isPostmasterAlive } from "./postmaster.mjs";

const lookEveryMs = 2_000;

/**
 * Starts the database again when its server has gone; stops the command when that does not help.
 * @param {object} options
 * @param {import("./cluster.mjs").Cluster} options.cluster
 * @param {import("../command.mjs").Context} options.context
 * @param {(line: string) => void} options.say
 */
export function keepClusterUp({ cluster, context, say }) {
  const { stopping } = context;
  /** @type {number[]} */
  const endedAtMs = [];
  const keep = async () => {
    for (;;) {
      await pause(lookEveryMs, stopping);
      if (isPostmasterAlive(dataOf(cluster))) continue;
      endedAtMs.push(Date.now());
      const delayMs = restartDelayMs(endedAtMs);
      const log = `${cluster.home}/server.log`;
      if (delayMs === null) return context.stop(`PostgreSQL keeps ending: mend the cause (see the end of ${log}), then start again.`);
      say(`PostgreSQL ended: starting it again (see the end of ${log}).`);
      await startCluster(cluster, { stopping, say });
    }
  };
  keep().catch((error) => {
    if (!stopping.aborted) context.stop(sentenceFor(error));
  });
}
