const demoAccounts = ["data", "planner", "manager", "admin"];

/**
 * What the start command says once the application answers.
 * @param {object} options
 * @param {string} options.address
 * @param {import("./settings.mjs").Settings} options.settings
 * @param {import("./state.mjs").State} options.state
 * @param {boolean} options.hasDemo
 * @returns {string[]}
 */
export function startedLines({ address, settings, state, hasDemo }) {
  const lines = ["", `Shelftide answers at ${address}`];
  if (settings.embedsMail) lines.push(`Caught mail is shown at http://127.0.0.1:${state.ports.mailPage}`);
  else if (!settings.namesSender) lines.push("Mail goes out from an invented address: set MAIL_FROM to your own.");
  if (hasDemo) {
    const names = demoAccounts.map((name) => `${name}@larkmoor.example`).join(", ");
    lines.push(`Demo accounts: ${names}`, "Their password: shelftide-demo");
    if (!settings.wantsDemo) lines.push("SHELFTIDE_DEMO=off comes too late: this data folder holds the demo already.");
  } else {
    lines.push("Make the first account with: npm run create-administrator -- EMAIL");
  }
  return [...lines, "Stop with Ctrl-C.", ""];
}
