import { openDataFolder } from "./data-folder.mjs";
import { openInstallation } from "./installation.mjs";
import { startServices } from "./services.mjs";
import { readSettings } from "./settings.mjs";
import { readState } from "./state.mjs";
import { readTurn } from "./turn.mjs";

/**
 * The installation's database for a short command: that of the running application, else started for the command
 * alone, else the real one that DATABASE_URL names.
 * @param {{ context: import("./command.mjs").Context, command: string, say: (line: string) => void }} options
 * @returns {Promise<Pick<import("./services.mjs").Installation, "settings" | "state" | "folder" | "context">>}
 */
export async function useDatabase({ context, command, say }) {
  const settings = readSettings();
  const folder = openDataFolder({ embedsDatabase: settings.embedsDatabase, say });
  const running = readTurn(folder);
  if (running?.address || !settings.embedsDatabase) {
    return { settings, state: readState(folder), folder, context };
  }
  const installation = await openInstallation({ context, command, say });
  await startServices(installation, { databaseOnly: true });
  return installation;
}
