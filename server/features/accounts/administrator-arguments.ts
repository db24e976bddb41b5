import { parseArgs } from "node:util";
import { everyCategory, roleSchema, type Role } from "@shared/contract/permissions";
import { unusable } from "../../errors";

const usage = "npm run create-administrator -- ada@chain.example [--roles data-admin,planner,category-manager]";

/** Whom the command makes. */
export type AskedPerson = { email: string; roles: Role[]; categories: string[] };

/**
 * Reads the command's arguments. The person is an administrator in any case, and as a category manager decides on every
 * category: a new installation has none yet that could be named.
 *
 * @throws ProblemError 422, in a sentence, for an address that is missing, anything unknown, or a role that is none.
 */
export function readArguments(given: readonly string[]): AskedPerson {
  const { positionals, values } = parse(given);
  const [email, ...more] = positionals;
  if (!email) throw unusable("email-missing", `Give the administrator's e-mail address: ${usage}`);
  if (more.length > 0) throw unusable("too-many-arguments", `Give one e-mail address, not also "${more[0]}": ${usage}`);
  const wanted = new Set(values.roles?.split(",").map((role) => role.trim()) ?? []).add("administrator");
  for (const role of wanted) {
    if (roleSchema.safeParse(role).success) continue;
    throw unusable("unknown-role", `There is no role "${role}": there are ${roleSchema.options.join(", ")}.`);
  }
  const roles = roleSchema.options.filter((role) => wanted.has(role));
  return { email, roles, categories: roles.includes("category-manager") ? [everyCategory] : [] };
}

function parse(given: readonly string[]) {
  try {
    return parseArgs({ args: [...given], allowPositionals: true, options: { roles: { type: "string" } } });
  } catch {
    throw unusable("unknown-arguments", `These arguments cannot be read: ${usage}`);
  }
}
