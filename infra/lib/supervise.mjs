import { restartDelayMs } from "./back-off.mjs";
import { pause } from "./command.mjs";
import { startPart } from "./part.mjs";
import { sentenceFor } from "./problem.mjs";

/**
 * Keeps a part running until the command is asked to stop: starts it again when it ends by itself, and stops the
 * command with a sentence when that happens too often.
 * @param {object} options
 * @param {import("./part.mjs").Part} options.part
 * @param {import("./command.mjs").Context} options.context
 * @param {import("./turn.mjs").TurnHandle} options.turn
 * @param {(line: string) => void} options.say
 * @param {() => Promise<void>} [options.untilUsable] waits for more than the part's own word
 * @returns {Promise<void>} once the part is ready for the first time
 */
export async function supervise({ part, context, turn, say, untilUsable }) {
  let current = begin();
  context.onClose(async () => {
    await current.stop();
    turn.removeChild(part.name);
  });
  await Promise.race([Promise.all([current.ready, untilUsable?.()]), current.failed]);
  void keep().catch((error) => context.stop(sentenceFor(error)));

  function begin() {
    const running = startPart(part);
    turn.addChild(part.name, running.pid);
    return running;
  }

  async function keep() {
    /** @type {number[]} */
    const endedAtMs = [];
    for (;;) {
      const how = await current.ended;
      if (context.stopping.aborted) return;
      endedAtMs.push(Date.now());
      const delayMs = restartDelayMs(endedAtMs);
      const ending = part.log ? `${how}; see the end of ${part.log}` : how;
      if (delayMs === null) {
        return context.stop(`The ${part.name} keeps ending (${ending}): mend the cause, then start again.`);
      }
      say(`The ${part.name} ended (${ending}): starting it again in ${delayMs / 1000} s.`);
      const went = await pause(delayMs, context.stopping).then(() => true, () => false);
      if (!went) return;
      current = begin();
    }
  }
}
