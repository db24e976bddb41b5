import { openDataFolder } from "./data-folder.mjs";
import { recordPrograms } from "./run-program.mjs";
import { readSettings } from "./settings.mjs";
import { readState } from "./state.mjs";
import { takeTurn, watchLauncher } from "./turn.mjs";

/**
 * Opens this checkout's installation for one command: reads what was set and remembered, and takes the turn.
 * @param {{ context: import("./command.mjs").Context, command: string, say: (line: string) => void }} options
 * @returns {Promise<import("./services.mjs").Installation>}
 */
export async function openInstallation({ context, command, say }) {
  const settings = readSettings();
  const folder = openDataFolder({ embedsDatabase: settings.embedsDatabase, say });
  const state = readState(folder);
  const turn = await takeTurn({ folder, command, say });
  context.onClose(() => turn.giveBack());
  recordPrograms(turn);
  void watchLauncher({ turn: turn.turn, context });
  return { context, turn, settings, state, folder, say };
}
