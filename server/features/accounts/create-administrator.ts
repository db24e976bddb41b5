import { randomBytes } from "node:crypto";
import { createOrm } from "../../database/orm";
import { readEnvironment } from "../../environment";
import { ProblemError } from "../../errors";
import { ensureChain } from "../chain";
import { readArguments, type AskedPerson } from "./administrator-arguments";
import { audit } from "./audit";
import { createPerson } from "./people.service";

/** Command: creates an administrator (and the chain where there is none) and prints a one-time password. */
async function createAdministrator({ email, roles, categories }: AskedPerson): Promise<string> {
  const orm = await createOrm(readEnvironment());
  try {
    const password = randomBytes(12).toString("base64url");
    await orm.em.fork().transactional(async (em) => {
      await ensureChain(em);
      const name = email.split("@")[0] ?? email;
      const person = await createPerson(em, {
        email,
        name,
        roles,
        categories,
        password,
        mustChangePassword: true,
      });
      audit(em, {
        personId: null,
        action: "person.created",
        subject: { kind: "person", id: person.id },
        detail: { roles: person.roles },
      });
    });
    return password;
  } finally {
    await orm.close();
  }
}

try {
  const asked = readArguments(process.argv.slice(2));
  const password = await createAdministrator(asked);
  const roles = asked.roles.join(", ");
  process.stdout.write(
    `Created ${asked.email} (${roles}). Password for the first sign-in, which asks for a new one:\n${password}\n`,
  );
} catch (error) {
  if (!(error instanceof ProblemError)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 1;
}
